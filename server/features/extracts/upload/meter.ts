import { createHash } from "node:crypto";
import { Transform, type TransformCallback } from "node:stream";
import { ProblemError, unusable } from "../../../errors";
import { sniffedBytes, whatInsteadOfText } from "./sniff-content";

/**
 * Lets a file through while it counts and hashes it, and breaks it off with a ProblemError as soon as it is over the
 * limit or turns out to be no text.
 */
export class Meter extends Transform {
  sizeBytes = 0;
  readonly #hash = createHash("sha256");
  readonly #limitBytes: number;
  #head: Buffer | undefined = Buffer.alloc(0);

  constructor(limitBytes: number) {
    super();
    this.#limitBytes = limitBytes;
  }

  /** SHA-256 in hexadecimal of what went through; to be asked once, at the end. */
  digest(): string {
    return this.#hash.digest("hex");
  }

  override _transform(chunk: Buffer, _encoding: BufferEncoding, done: TransformCallback): void {
    this.sizeBytes += chunk.length;
    this.#hash.update(chunk);
    const problem = this.sizeBytes > this.#limitBytes ? overLimit(this.#limitBytes) : this.#sniff(chunk);
    if (problem) done(problem);
    else done(null, chunk);
  }

  override _flush(done: TransformCallback): void {
    done(this.#notText() ?? (this.sizeBytes === 0 ? emptyFile() : null));
  }

  #sniff(chunk: Buffer): ProblemError | undefined {
    if (!this.#head) return undefined;
    this.#head = Buffer.concat([this.#head, chunk.subarray(0, sniffedBytes - this.#head.length)]);
    if (this.#head.length < sniffedBytes) return undefined;
    const problem = this.#notText();
    this.#head = undefined;
    return problem;
  }

  #notText(): ProblemError | undefined {
    const what = this.#head && whatInsteadOfText(this.#head);
    if (!what) return undefined;
    return unusable("not-a-csv-file", `This is ${what}, no CSV text. Export it as CSV (comma separated, UTF-8) and upload that.`);
  }
}

const emptyFile = () => unusable("empty-file", "The file is empty. Check the export that made it, and upload it again.");

/** The answer to a file over the chain's limit. */
export function overLimit(limitBytes: number): ProblemError {
  const limit = describeSize(limitBytes);
  const detail = `The file is larger than ${limit}, the most this chain accepts. Split it by weeks, compress it (.csv.gz), or ask an administrator to raise the limit.`;
  return new ProblemError({ status: 413, code: "file-too-large", detail });
}

function describeSize(bytes: number): string {
  const units = ["bytes", "kB", "MB", "GB", "TB"];
  const step = Math.min(units.length - 1, Math.floor(Math.log(Math.max(1, bytes)) / Math.log(1024)));
  return `${Number((bytes / 1024 ** step).toFixed(1))} ${units[step]}`;
}
