import type { EntityManager } from "@mikro-orm/postgresql";
import type { ExtractChanges } from "@shared/contract/extracts";
import { conflict, notFound, ProblemError } from "../../../errors";
import type { Services } from "../../../services";
import { audit } from "../../accounts";
import { checkTogether } from "../check/check-together";
import { quietly, type Progress } from "../check/progress";
import { stageRows } from "../check/stage-rows";
import { countInLater } from "../coverage/count-in-later";
import type { Extract } from "../extracts.entities";
import { changesOf, findExtract, forgetStanding, giveMemory, layoutInForceOf, lockCheck, lockExtract } from "../extracts.repository";
import { getExtract } from "../extracts.service";
import { kinds } from "../kinds/kinds";
import { noticeLoaded } from "../notices/extract-notices";
import { lockLoads } from "./load-lock.repository";
import { SecondLookNeeded, secondLookNeeded } from "./second-look";
import { dropStaging, hasStaged, stagingTable } from "./staging.repository";

/** Who asked for it; the one who uploaded the file, where nobody is named. */
export type Actor = { personId: string; tokenId?: string | null; requestId?: string | null };

type LoadOptions = {
  extractId: string;
  actor?: Actor;
  /** Why it needs a second look, as a person has seen and confirmed it; "everything" where that was seen to otherwise. */
  seen?: Seen;
  progress?: Progress;
};
type Seen = readonly string[] | "everything";

const steps = 4;

/**
 * Loads an extract's usable rows: all of them, or none where anything fails. One load runs at a time in the whole
 * installation, so two cannot mix. A file that was loaded already answers what it changed then, and changes nothing.
 *
 * @returns how many rows were new, changed, and there already.
 * @throws ProblemError 404; 409 where the extract is not checked, or would change more than usual by now and nobody has
 * seen that: what it would change is then kept with it.
 */
export async function loadExtract(services: Services, options: LoadOptions): Promise<ExtractChanges["totals"]> {
  try {
    return await loadOnce(services, options);
  } catch (error) {
    if (!(error instanceof SecondLookNeeded)) throw error;
    const { changes } = error;
    await services.orm.em.fork().transactional((em) => keepChanges(em, { extractId: options.extractId, changes }));
    throw secondLookNeeded(changes.secondLook);
  }
}

async function keepChanges(em: EntityManager, { extractId, changes }: { extractId: string; changes: ExtractChanges }): Promise<void> {
  const extract = await lockExtract(em, extractId);
  if (extract?.state !== "checked" && extract?.state !== "loading") return;
  extract.changes = changes;
  extract.changesAsOf = null;
}

async function loadOnce(services: Services, { extractId, actor, seen = [], progress = quietly }: LoadOptions): Promise<ExtractChanges["totals"]> {
  const step = (done: number, message: string) => progress({ done, total: steps, message });
  await step(0, "Making the rows ready");
  await ensureStaged(services, { extractId, progress });
  await step(1, "Waiting for other loads to end");
  const changes = await services.orm.em.fork().transactional(async (em) => {
    await lockLoads(em);
    await giveMemory(em);
    const extract = requireLoadable(await findExtract(em, extractId));
    if (extract.state === "loaded") return changesOf(em, extract);
    return load({ em, services, extract, actor, seen, step });
  });
  return changes?.totals ?? { new: 0, changed: 0, same: 0, missing: 0 };
}

type Load = { em: EntityManager; services: Services; extract: Extract; actor?: Actor; seen: Seen; step: (done: number, message: string) => Promise<void> };

/** What the check found, where nothing was loaded or withdrawn since; else worked out anew. To be called under the load lock. */
async function changesNow(em: EntityManager, extract: Extract): Promise<ExtractChanges> {
  const { compare, standing } = kinds[extract.kind];
  const asOf = extract.changesAsOf ?? null;
  const known = asOf !== null && asOf === (await standing?.(em)) ? await changesOf(em, extract) : null;
  return known ?? compare({ em, table: stagingTable(extract.id) });
}

async function load({ em, services, extract: checked, actor, seen, step }: Load): Promise<ExtractChanges> {
  const { id, kind, fileName, uploadedBy } = checked;
  const { load: loadRows } = kinds[kind];
  const by = actor ?? { personId: uploadedBy.id };
  const now = services.now();
  await step(2, "Comparing with what is there");
  const changes = await changesNow(em, checked);
  if (seen !== "everything" && changes.secondLook.some((reason) => !seen.includes(reason))) throw new SecondLookNeeded(changes);
  await step(3, "Loading");
  await loadRows({ em, table: stagingTable(id), extractId: id, now, changes, by: { ...by, file: { id, name: fileName } } });
  await dropStaging(em, id);
  const extract = requireLoadable(await lockExtract(em, id));
  extract.state = "loaded";
  extract.changes = changes;
  extract.loadedAt = now;
  extract.failure = null;
  audit(em, { ...by, action: "extract.loaded", subject: { kind: "extract", id }, detail: { fileName, ...changes.totals, ...confirmed(changes) } });
  await countInLater(em, { services, extract });
  await noticeLoaded(em, services, { extract, changes, by });
  // The last moment at which a cancellation or the loss of the job can still undo everything.
  await step(steps, changes.totals.new + changes.totals.changed > 0 ? "Loaded" : "Every row is there already: nothing was changed");
  return changes;
}

/** What was seen and confirmed, for the audit trail. */
const confirmed = ({ secondLook }: ExtractChanges) => (secondLook.length > 0 ? { secondLookConfirmed: secondLook } : {});

function requireLoadable(extract: Extract | null): Extract {
  if (!extract) throw notFound("extract");
  if (extract.state === "checked" || extract.state === "loading" || extract.state === "loaded") return extract;
  throw conflict("not-checked", `This extract is ${extract.state}: only one that was checked can be loaded.`);
}

/**
 * Sees to it that the rows found usable by the check wait in the staging table. They are gone where the database server
 * broke down meanwhile, since that table is not logged; the file is then read again, by the same rules.
 */
async function ensureStaged(services: Services, { extractId, progress }: { extractId: string; progress: Progress }): Promise<void> {
  const extract = await getExtract(services.orm.em.fork(), extractId);
  if (extract.state !== "checked" && extract.state !== "loading") return;
  const isKept = await services.orm.em.fork().transactional(async (em) => {
    await lockCheck(em, extractId);
    if (await hasStaged(em, extractId)) return true;
    await stageAgain({ em, services, extract, progress });
    return false;
  });
  const { prepareLoad } = kinds[extract.kind];
  await services.orm.em.fork().transactional(async (em) => {
    const checked = isKept ? await findExtract(em, extractId) : null;
    const weeks = checked && ((await changesOf(em, checked))?.weeks.map(({ week }) => week) ?? null);
    await prepareLoad?.({ em, table: stagingTable(extractId), weeks });
  });
}

async function stageAgain({ em, services, extract, progress }: { em: EntityManager; services: Services; extract: Extract; progress: Progress }): Promise<void> {
  const managed = await findExtract(em, extract.id);
  const layout = managed && await layoutInForceOf(em, managed);
  const { table, log, notes } = await stageRows({
    em, services, extract, layout,
    progress: ({ readBytes }) => progress({ done: readBytes / Math.max(1, extract.sizeBytes), total: steps, message: "Reading the file again" }),
  });
  // What is wrong with the rows is on record from the check.
  const usable = await checkTogether({ em, table, extractId: extract.id, log, notes, keep: false, definition: kinds[extract.kind] });
  await forgetStanding(em, extract.id);
  if (usable === extract.rowsUsable) return;
  const detail = `Since the check the catalogue has changed: ${usable} rows can be used now, not ${extract.rowsUsable ?? 0}. Check the file again, look at the list, and load it then.`;
  throw new ProblemError({ status: 409, code: "check-outdated", detail });
}

/** Puts an extract back to where it was before a load that broke down, with the reason. */
export function abandonLoad(services: Services, { extractId, error }: { extractId: string; error: { code: string; detail: string } }): Promise<void> {
  return services.orm.em.fork().transactional(async (em) => {
    const extract = await lockExtract(em, extractId);
    if (extract?.state !== "loading") return;
    extract.state = "checked";
    extract.failure = error;
  });
}

