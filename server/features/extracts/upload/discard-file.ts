import type { Services } from "../../../services";
import { forgetIncoming } from "./incoming-files.repository";

/** Removes a stored file that becomes no extract. Where the store does not answer, a later upload's clean-up does it. */
export async function discardFile({ files, orm, logger }: Services, storageKey: string): Promise<void> {
  try {
    await files.remove(storageKey);
    await forgetIncoming(orm.em.fork(), storageKey);
  } catch (error) {
    logger.warn({ err: error, storageKey }, "a file that is not needed stays in the store for now");
  }
}
