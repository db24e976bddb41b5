import type { EntityManager } from "@mikro-orm/postgresql";
import type { Readable } from "node:stream";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Services } from "../../../services";
import { audit } from "../../accounts";
import { getChain } from "../../chain";
import { ExtractEntity, type Extract } from "../extracts.entities";
import type { Actor } from "../load/load-extract.service";
import { requireLayoutByName } from "../layouts/saved-layouts.service";
import { enqueueCheck } from "../requests.service";
import { cleanFileName } from "./clean-file-name";
import { discardFile } from "./discard-file";
import { forgetIncoming } from "./incoming-files.repository";
import type { ReceivedFile } from "./receive-upload";
import { storeOriginal } from "./store-original";

type Registration = {
  file: ReceivedFile;
  kind: ExtractKind;
  layout?: string;
  actor: Actor;
  /** Whether a worker is to check it. */
  inBackground: boolean;
};

/**
 * Makes an extract of a file that is in the store, and has it checked. Where that fails the file is removed again.
 *
 * @param layout name of the saved layout to read it by; it is copied now, so that what happens to it later changes nothing
 * @returns the extract with who uploaded it.
 * @throws ProblemError 422 where no layout has that name.
 */
export async function registerExtract(em: EntityManager, services: Services, { file, kind, layout, actor, inBackground }: Registration): Promise<Extract> {
  try {
    return await em.transactional(async (inner) => {
      const { id, storageKey, sizeBytes, sha256, fileName } = file;
      const saved = layout ? await requireLayoutByName(inner, { name: layout, kind }) : null;
      const extract = inner.create(ExtractEntity, {
        id, kind, fileName, sizeBytes, sha256, storageKey, layout: saved?.name ?? null, state: "received",
        ...(saved && { layoutOrigin: "saved", layoutInForce: saved.layout, savedLayout: saved, layoutConfirmed: true }),
        uploadedBy: actor.personId, uploadedAt: services.now(),
      });
      await inner.persist(extract).flush();
      if (inBackground) await enqueueCheck(inner, { services, extract, personId: actor.personId });
      audit(inner, { ...actor, action: "extract.uploaded", subject: { kind: "extract", id }, detail: { fileName, kind, sizeBytes, sha256 } });
      await forgetIncoming(inner, storageKey);
      await inner.populate(extract, ["uploadedBy", "savedLayout"]);
      return extract;
    });
  } catch (error) {
    await discardFile(services, file.storageKey);
    throw error;
  }
}

export type NewExtract = {
  body: Readable;
  fileName: string;
  kind: ExtractKind;
  layout?: string;
  personId: string;
  /** Whether a worker is to check it; without one, call `checkExtract`. */
  inBackground?: boolean;
};

/**
 * Takes a file in from a stream, as the HTTP upload does: kept unchanged, and entered as an extract.
 *
 * @throws ProblemError for an empty or binary file, one over the chain's limit, or where the file store does not take it.
 */
export async function receiveExtract(services: Services, { body, fileName, kind, layout, personId, inBackground = true }: NewExtract): Promise<Extract> {
  const em = services.orm.em.fork();
  const { uploadLimitBytes } = await getChain(em);
  const stored = await storeOriginal(services, { body, limitBytes: uploadLimitBytes });
  return registerExtract(em, services, { file: { ...stored, fileName: cleanFileName(fileName) }, kind, layout, actor: { personId }, inBackground });
}
