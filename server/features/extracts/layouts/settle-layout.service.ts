import type { Services } from "../../../services";
import { calendarOf, getChain } from "../../chain";
import type { Extract, SavedLayout } from "../extracts.entities";
import { layoutInForceOf, lockExtract } from "../extracts.repository";
import { getExtract } from "../extracts.service";
import { chooseLayout, type Choice } from "./choose-layout";
import { layoutNeeded } from "./layout-needed";
import { readFileHead } from "./read-file-head";
import { findLayoutsToRecognise, findSavedLayout } from "./saved-layouts.repository";

/**
 * Settles how an extract's file is read, before its rows are: as a person has set, or as the file's first 64 KiB tell.
 * What is worked out anew at each check, so that a layout saved meanwhile is found.
 *
 * @throws UnreadableFile where it cannot be read at all, or where needed columns are not to be found in it; what was worked
 * out is kept then too, for a person to complete.
 */
export async function settleLayout(services: Services, extractId: string): Promise<void> {
  const em = services.orm.em.fork();
  const extract = await getExtract(em, extractId);
  if (isSet(extract)) return noteUse(services, extract.savedLayout?.id);
  const head = await readFileHead(services.files, extract.storageKey);
  const { choice, saved } = await chooseFor(services, { extract, head });
  await keep(services, { extractId, choice, saved });
  const needed = layoutNeeded(head, choice.layout);
  if (needed) throw needed;
}

/** Whether a person has set it, by name or for this file. */
const isSet = ({ layoutOrigin, layoutConfirmed }: Extract) => layoutConfirmed && (layoutOrigin === "saved" || layoutOrigin === "chosen");

/** How a file would be read that nobody has set a layout for. @throws UnreadableFile where it holds no lines. */
export async function chooseFor(
  services: Services, { extract, head }: { extract: Pick<Extract, "kind">; head: Uint8Array },
): Promise<{ choice: Choice; saved: SavedLayout | null }> {
  const em = services.orm.em.fork();
  const { weekStart } = calendarOf(await getChain(em));
  const saved = await findLayoutsToRecognise(em, extract.kind);
  const choice = chooseLayout(head, { kind: extract.kind, saved: saved.map(({ layout }) => layout), weekStart });
  return { choice, saved: choice.origin === "saved" ? (saved[choice.index] ?? null) : null };
}

type Settled = { extractId: string; choice: Choice; saved: SavedLayout | null };

function keep(services: Services, { extractId, choice: { origin, layout }, saved }: Settled): Promise<void> {
  return services.orm.em.fork().transactional(async (em) => {
    const extract = await lockExtract(em, extractId);
    if (!extract || isSet(extract)) return;
    await layoutInForceOf(em, extract);
    const known = saved ? await findSavedLayout(em, saved.id) : null;
    if (known) known.lastUsedAt = services.now();
    // Of a layout deleted this very moment the copy still counts.
    Object.assign(extract, {
      layoutOrigin: origin, layoutInForce: origin === "own" ? null : layout, savedLayout: known, layoutConfirmed: origin !== "proposed",
    });
  });
}

async function noteUse(services: Services, savedId: string | undefined): Promise<void> {
  if (savedId === undefined) return;
  await services.orm.em.fork().transactional(async (em) => {
    const saved = await findSavedLayout(em, savedId);
    if (saved) saved.lastUsedAt = services.now();
  });
}
