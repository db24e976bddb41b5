import type { Request, RequestHandler } from "express";
import multer, { MulterError, type StorageEngine } from "multer";
import { uploadExtract } from "@shared/contract/extracts";
import { ProblemError, unusable } from "../../../errors";
import type { Services } from "../../../services";
import { getChain } from "../../chain";
import { cleanFileName } from "./clean-file-name";
import { discardFile } from "./discard-file";
import { overLimit } from "./meter";
import { storeOriginal, type StoredOriginal } from "./store-original";

export type ReceivedFile = StoredOriginal & { fileName: string };

const received = new WeakMap<Request, ReceivedFile>();

/** What the step below has put into the file store for this request. */
export function receivedFile(request: Request): ReceivedFile {
  const file = received.get(request);
  if (!file) throw new Error("No file was received: receiveUpload must run before the handler.");
  return file;
}

/** What multipart may cost besides the file: boundaries, headers and the small fields. */
const multipartOverheadBytes = 64 * 1024;
/** How long a sender whose file was refused may go on sending, so that it reads the answer before the line is cut. */
const lingerMs = 5_000;

/**
 * Step of a request's way: streams the one file of a multipart body into the file store and reads the fields beside it.
 * Whatever is wrong, nothing stays stored, and the answer does not wait for the rest of the file.
 */
export const receiveUpload = (services: Services): RequestHandler => (request, response, next) => {
  let answered = false;
  const refuse = (problem: unknown) => {
    if (answered) return;
    answered = true;
    response.once("finish", () => hangUpSoon(request));
    request.resume();
    next(problem);
  };
  const receive = async () => {
    if (!request.is("multipart/form-data")) throw notMultipart();
    const { uploadLimitBytes } = await getChain(services.orm.em.fork());
    if (Number(request.get("content-length")) > uploadLimitBytes + multipartOverheadBytes) throw overLimit(uploadLimitBytes);
    const storage = storageOf({ services, limitBytes: uploadLimitBytes, onRefused: refuse });
    await readMultipart({ request, response, storage }).catch(async (error: unknown) => {
      throw (await storage.failure()) ?? error;
    });
    await requireComplete(request, services);
  };
  receive().then(() => {
    if (answered) return;
    answered = true;
    next();
  }, refuse);
};

type StorageOptions = { services: Services; limitBytes: number; onRefused: (problem: ProblemError) => void };

/**
 * Storing is cut off by ending the file's stream, which the parser may report first, as a broken form: `failure` waits for
 * what storing itself has to say, undefined where it knows no reason of its own.
 */
type Storage = StorageEngine & { failure: () => Promise<ProblemError | undefined> };

function storageOf({ services, limitBytes, onRefused }: StorageOptions): Storage {
  let storing: Promise<StoredOriginal> | undefined;
  return {
    failure: async () => {
      const [outcome] = await Promise.allSettled([storing]);
      return outcome.status === "rejected" && outcome.reason instanceof ProblemError ? outcome.reason : undefined;
    },
    _handleFile(request, file, done) {
      storing = storeOriginal(services, { body: file.stream, limitBytes });
      storing.then(
        (stored) => {
          received.set(request, { ...stored, fileName: cleanFileName(file.originalname) });
          done(null, { size: stored.sizeBytes });
        },
        (error: unknown) => {
          // The package would answer only after the last byte of the file, however long it is.
          if (error instanceof ProblemError) onRefused(error);
          done(error);
        },
      );
    },
    _removeFile(request, _file, done) {
      discard(request, services).then(() => done(null), done);
    },
  };
}

function readMultipart({ request, response, storage }: { request: Request; response: Parameters<RequestHandler>[1]; storage: StorageEngine }) {
  const limits = { files: 1, fields: 10, parts: 12, fieldNameSize: 100, fieldSize: 1_000, headerPairs: 20 };
  const read = multer({ storage, limits, defParamCharset: "utf8", preservePath: true }).single("file");
  return new Promise<void>((resolve, reject) => {
    read(request, response, (error: unknown) => (error ? reject(asProblem(error)) : resolve()));
  });
}

/** The file is stored, but the rest of the form may still be wrong. */
async function requireComplete(request: Request, services: Services): Promise<void> {
  if (!received.has(request)) throw missingFile();
  const form = uploadExtract.body?.safeParse(request.body);
  if (form?.success) return;
  await discard(request, services);
  if (!form) return;
  const errors = form.error.issues.map((issue) => ({ path: issue.path.join("."), message: issue.message }));
  const detail = errors[0]?.path === "kind"
    ? `Say what the file holds in the field "kind": ${uploadExtract.body?.shape.kind.options.join(", ")}.`
    : `The form cannot be used: ${errors[0]?.message ?? "it is malformed"}`;
  throw unusable("invalid-request", detail, errors);
}

async function discard(request: Request, services: Services): Promise<void> {
  const file = received.get(request);
  received.delete(request);
  if (file) await discardFile(services, file.storageKey);
}

function asProblem(error: unknown): unknown {
  if (error instanceof ProblemError) return error;
  if (error instanceof MulterError) return formProblem(error);
  // What remains are broken or half-sent multipart bodies.
  const detail = "The upload broke off or is no proper multipart/form-data. Nothing was stored; send the file again.";
  return new ProblemError({ status: 400, code: "malformed-upload", detail });
}

function formProblem(error: MulterError): ProblemError {
  if (error.code === "LIMIT_UNEXPECTED_FILE" && error.field !== "file") return missingFile();
  if (error.code === "LIMIT_UNEXPECTED_FILE" || error.code === "LIMIT_FILE_COUNT") {
    return unusable("one-file-only", "Send one file with each request, in the field \"file\".");
  }
  return unusable("invalid-request", `The form cannot be used: ${error.message}.`);
}

const missingFile = () => unusable("missing-file", "There is no file in the field \"file\". Choose a file and send it again.");

const notMultipart = () => {
  const detail = "Send the file as multipart/form-data, with the fields file and kind.";
  return new ProblemError({ status: 415, code: "unsupported-content-type", detail });
};

function hangUpSoon(request: Request): void {
  if (request.complete || request.destroyed) return;
  const timer = setTimeout(() => request.destroy(), lingerMs);
  timer.unref();
  request.once("close", () => clearTimeout(timer));
}
