import { randomUUID } from "node:crypto";
import type { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { ProblemError } from "../../../errors";
import type { Services } from "../../../services";
import { abandonedFiles, forgetIncoming, noteIncoming } from "./incoming-files.repository";
import { Meter } from "./meter";

/** A file that is in the store, before there is an extract for it. */
export type StoredOriginal = {
  /** Of the extract to be. */
  id: string;
  storageKey: string;
  sizeBytes: number;
  sha256: string;
};

/**
 * Streams a file into the store, unchanged.
 *
 * @throws ProblemError 413 over the limit, 422 for an empty or binary file, 503 where the store does not take it; the
 * body's own error where that breaks. Nothing is kept then.
 */
export async function storeOriginal(services: Services, { body, limitBytes }: { body: Readable; limitBytes: number }): Promise<StoredOriginal> {
  const id = randomUUID();
  const storageKey = `extracts/${id}/original`;
  const em = services.orm.em.fork();
  await noteIncoming(em, { storageKey, now: services.now() });
  try {
    const stored = await put(services, { storageKey, body, limitBytes });
    return { id, storageKey, ...stored };
  } catch (error) {
    await forgetIncoming(em, storageKey);
    throw error;
  } finally {
    void removeAbandoned(services);
  }
}

type Put = { storageKey: string; body: Readable; limitBytes: number };

async function put({ files, logger }: Services, { storageKey, body, limitBytes }: Put): Promise<Pick<StoredOriginal, "sizeBytes" | "sha256">> {
  const meter = new Meter(limitBytes);
  const putting = files.put({ key: storageKey, body: meter, contentType: "application/octet-stream" });
  let storeGaveUp = false;
  putting.catch((error: Error) => {
    if (meter.destroyed) return;
    // The rest of the body has nowhere to go.
    storeGaveUp = true;
    meter.destroy(error);
  });
  const [read, put] = await Promise.allSettled([pipeline(body, meter), putting]);
  if (read.status === "fulfilled" && put.status === "fulfilled") {
    return { sizeBytes: meter.sizeBytes, sha256: meter.digest() };
  }
  if (read.status === "rejected" && !storeGaveUp) throw read.reason;
  logger.error({ err: put.status === "rejected" && put.reason, storageKey }, "the file store did not take a file");
  throw new ProblemError({ status: 503, code: "file-store-unavailable", detail: "The file could not be kept. Nothing was stored; try again in a minute." });
}

/** Removes what processes that were killed in the middle of an upload have left in the store. */
async function removeAbandoned({ orm, files, logger, now }: Services): Promise<void> {
  try {
    const em = orm.em.fork();
    for (const storageKey of await abandonedFiles(em, now())) {
      await files.remove(storageKey);
      await forgetIncoming(em, storageKey);
    }
  } catch (error) {
    logger.warn({ err: error }, "abandoned uploads could not be removed");
  }
}
