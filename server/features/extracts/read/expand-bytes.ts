import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { createGunzip } from "node:zlib";
import { isGzip } from "../upload/sniff-content";
import { UnreadableFile } from "./unreadable-file";

/** Sales text compresses some 5 to 30 times; what grows more than this is made to fill a disk or a memory. */
const mostExpansion = 200;
/** Short files may be as regular as they like. */
const freeBytes = 64 * 1024 ** 2;

type Options = {
  /** Told how many bytes of the stored file were read so far. */
  onRead: (bytes: number) => void;
  /** Most bytes that a compressed file may hold. */
  limitBytes: number;
};

/**
 * The bytes of a file, unpacked where it is a gzip file (told by its content, not its name).
 *
 * @throws UnreadableFile for a gzip file that is broken, cut short, or grows beyond all measure.
 */
export async function* expandBytes(stored: AsyncIterable<Buffer>, { onRead, limitBytes }: Options): AsyncGenerator<Buffer> {
  let readBytes = 0;
  const counted = async function* () {
    for await (const chunk of stored) {
      readBytes += chunk.length;
      onRead(readBytes);
      yield chunk;
    }
  };
  const chunks = counted();
  const head = await firstBytes(chunks);
  const whole = resume(head, chunks);
  if (!isGzip(head)) {
    yield* whole;
    return;
  }
  let expandedBytes = 0;
  for await (const chunk of gunzip(whole)) {
    expandedBytes += chunk.length;
    const tooDense = expandedBytes > freeBytes && expandedBytes > mostExpansion * readBytes;
    if (tooDense || expandedBytes > limitBytes) throw tooMuch();
    yield chunk;
  }
}

/** The first chunk, joined with the next where it is too short to tell what the file is. */
async function firstBytes(chunks: AsyncGenerator<Buffer>): Promise<Buffer> {
  let head = Buffer.alloc(0);
  while (head.length < 4) {
    const next = await chunks.next();
    if (next.done) break;
    head = Buffer.concat([head, next.value]);
  }
  return head;
}

async function* resume(head: Buffer, rest: AsyncGenerator<Buffer>): AsyncGenerator<Buffer> {
  if (head.length > 0) yield head;
  yield* rest;
}

async function* gunzip(compressed: AsyncIterable<Buffer>): AsyncGenerator<Buffer> {
  const expanded = createGunzip();
  const piped = pipeline(Readable.from(compressed, { objectMode: false }), expanded);
  // The loop below throws the same error.
  piped.catch(() => undefined);
  try {
    for await (const chunk of expanded as AsyncIterable<Buffer>) yield chunk;
  } catch (error) {
    throw isZlibError(error) ? brokenGzip() : error;
  }
}

/** Whether unpacking has failed on what it was given. */
export const isZlibError = (error: unknown) => error instanceof Error && "code" in error && String(error.code).startsWith("Z_");

/** What a damaged or cut gzip file is answered by. */
export const brokenGzip = () =>
  new UnreadableFile("broken-gzip", "The compressed file is damaged or ends early. Compress it again, or upload the .csv itself.");

const tooMuch = () =>
  new UnreadableFile("expands-too-much", "Unpacked, the compressed file is far larger than sales data can be. Upload the .csv itself.");
