import { DeleteObjectCommand, GetObjectCommand, HeadBucketCommand, S3Client, S3ServiceException } from "@aws-sdk/client-s3";
import { Upload } from "@aws-sdk/lib-storage";
import type { Readable } from "node:stream";
import type { Environment } from "../environment";
import { ProblemError } from "../errors";

/** Keeps files unchanged under a key. */
export type FileStore = {
  /**
   * Streams a body of unknown length, holding some 20 MB of it in memory however long it is. To give up, destroy the
   * body with an error: nothing is kept, and the promise is rejected with that error once what was sent is removed.
   */
  put: (file: { key: string; body: Readable; contentType: string }) => Promise<void>;
  /** The bytes as they were stored. @throws ProblemError 503 where the store cannot be reached. */
  get: (key: string) => Promise<Readable>;
  /** The first bytes of a file; fewer where it is shorter. No more than these are asked for. @throws ProblemError as `get`. */
  head: (key: string, bytes: number) => Promise<Buffer>;
  /** Removes a file; one that is not there is no error. */
  remove: (key: string) => Promise<void>;
  /** Throws where the store cannot be reached. */
  check: () => Promise<void>;
  close: () => void;
};

/** Stores that know no ranges send the whole file: then it is cut off here. */
async function firstBytes(body: Readable, bytes: number): Promise<Buffer> {
  const chunks: Buffer[] = [];
  let length = 0;
  for await (const chunk of body as AsyncIterable<Buffer>) {
    chunks.push(chunk);
    length += chunk.length;
    if (length >= bytes) break;
  }
  return Buffer.concat(chunks).subarray(0, bytes);
}

/** A file store in an S3 bucket, which exists already. */
export function createFileStore(environment: Environment): FileStore {
  const bucket = environment.S3_BUCKET;
  const client = new S3Client({
    endpoint: environment.S3_ENDPOINT,
    region: environment.S3_REGION,
    forcePathStyle: environment.S3_ENDPOINT !== undefined,
    credentials: { accessKeyId: environment.S3_ACCESS_KEY_ID, secretAccessKey: environment.S3_SECRET_ACCESS_KEY },
    // Otherwise a streamed body is stored wrapped in checksum chunks by stores that do not know them.
    requestChecksumCalculation: "WHEN_REQUIRED",
    responseChecksumValidation: "WHEN_REQUIRED",
  });
  const read = (key: string, range?: string) =>
    client.send(new GetObjectCommand({ Bucket: bucket, Key: key, Range: range })).catch((error: unknown) => {
      throw isAnswer(error) ? error : unreachable();
    });
  return {
    async put({ key, body, contentType }) {
      const upload = new Upload({ client, params: { Bucket: bucket, Key: key, Body: body, ContentType: contentType } });
      try {
        await upload.done();
      } catch (error) {
        // Taking back what was sent may fail too; what counts is why it had to be.
        throw body.errored ?? error;
      }
    },
    async get(key) {
      const { Body } = await read(key);
      if (!Body) throw new Error(`The file store has no body for ${key}.`);
      return Body as Readable;
    },
    async head(key, bytes) {
      const { Body } = await read(key, `bytes=0-${bytes - 1}`);
      if (!Body) throw new Error(`The file store has no body for ${key}.`);
      return firstBytes(Body as Readable, bytes);
    },
    async remove(key) {
      await client.send(new DeleteObjectCommand({ Bucket: bucket, Key: key }));
    },
    async check() {
      await client.send(new HeadBucketCommand({ Bucket: bucket }));
    },
    close: () => client.destroy(),
  };
}

/** Whether the store itself said no, for example because there is no such file. */
const isAnswer = (error: unknown) =>
  error instanceof S3ServiceException && error.$metadata.httpStatusCode !== undefined && error.$metadata.httpStatusCode < 500;

const unreachable = () =>
  new ProblemError({
    status: 503, code: "file-store-unavailable", isPassing: true,
    detail: "The file store does not answer, so the file cannot be read. Nothing was changed; try again in a minute.",
  });
