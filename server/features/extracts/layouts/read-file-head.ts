import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { constants, createGunzip } from "node:zlib";
import { headBytes } from "@shared/layouts";
import type { FileStore } from "../../../storage/file-store";
import { requireText } from "../read/decode-text";
import { brokenGzip, isZlibError } from "../read/expand-bytes";
import { isGzip } from "../upload/sniff-content";

/** What no packing makes more of: blocks that are stored as they are cost a few bytes each. */
const askedBytes = headBytes + 4096;

/**
 * A stored file's first 64 KiB, unpacked where it is a gzip file; no more of it is read than that takes.
 *
 * @throws UnreadableFile where the file can be no text, or is a gzip file that is broken.
 */
export async function readFileHead(files: FileStore, storageKey: string): Promise<Buffer> {
  const stored = await files.head(storageKey, askedBytes);
  const head = isGzip(stored) ? await unpack(stored, { isWhole: stored.length < askedBytes }) : stored;
  requireText(head);
  return head.subarray(0, headBytes);
}

async function unpack(packed: Buffer, { isWhole }: { isWhole: boolean }): Promise<Buffer> {
  // Of a part, what it holds is wanted; of a whole file also whether it ends as it should.
  const expanded = createGunzip(isWhole ? {} : { finishFlush: constants.Z_SYNC_FLUSH });
  pipeline(Readable.from([packed]), expanded).catch(() => undefined);
  const chunks: Buffer[] = [];
  let length = 0;
  try {
    for await (const chunk of expanded as AsyncIterable<Buffer>) {
      chunks.push(chunk);
      length += chunk.length;
      if (length >= headBytes) break;
    }
  } catch (error) {
    throw isZlibError(error) ? brokenGzip() : error;
  }
  return Buffer.concat(chunks);
}
