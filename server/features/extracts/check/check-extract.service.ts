import type { EntityManager } from "@mikro-orm/postgresql";
import type { ExtractChanges } from "@shared/contract/extracts";
import type { Services } from "../../../services";
import type { Extract } from "../extracts.entities";
import { giveMemory, layoutInForceOf, lockCheck, lockExtract, removeIssues } from "../extracts.repository";
import { getExtract } from "../extracts.service";
import type { KindDefinition } from "../kinds/kind";
import { kinds } from "../kinds/kinds";
import { settleLayout } from "../layouts/settle-layout.service";
import { dropStaging } from "../load/staging.repository";
import { noticeChecked } from "../notices/extract-notices";
import { UnreadableFile } from "../read/unreadable-file";
import { checkTogether } from "./check-together";
import { keepIssues, weeksStaged } from "./check.repository";
import { lockCheckable } from "./lock-checkable";
import { quietly, type Progress } from "./progress";
import { stageRows, type StagingProgress } from "./stage-rows";

const count = new Intl.NumberFormat("en-GB");

/**
 * Checks an extract's file against the columns of its kind and against the catalogue, keeps what is wrong with its rows,
 * puts the usable ones where a load finds them, and works out what loading would change. Checking again begins anew.
 *
 * @returns the extract as it then is: "checked", or "unusable" with `failure`.
 * @throws ProblemError 404, or 409 where it is loaded or being loaded.
 */
export async function checkExtract(services: Services, { extractId, progress = quietly }: { extractId: string; progress?: Progress }): Promise<Extract> {
  await begin(services, extractId);
  try {
    await settleLayout(services, extractId);
    await services.orm.em.fork().transactional((em) => check({ em, services, extractId, progress }));
  } catch (error) {
    if (!(error instanceof UnreadableFile)) throw error;
    await services.orm.em.fork().transactional((em) => setUnusable({ em, services, extractId, error }));
  }
  return getExtract(services.orm.em.fork(), extractId);
}

function begin(services: Services, extractId: string): Promise<void> {
  return services.orm.em.fork().transactional(async (em) => {
    const extract = await lockCheckable(em, extractId);
    extract.state = "checking";
    extract.failure = null;
  });
}

type Checking = { em: EntityManager; services: Services; extractId: string; progress: Progress };

async function check({ em, services, extractId, progress }: Checking): Promise<void> {
  // A second worker, which took the first for dead, waits for it.
  await lockCheck(em, extractId);
  await giveMemory(em);
  const found = await getExtract(em, extractId);
  const { kind, storageKey, sizeBytes } = found;
  const layout = await layoutInForceOf(em, found);
  const definition = kinds[kind];
  await removeIssues(em, extractId);
  const { table, rowsRead, log, notes } = await stageRows({
    em, services, extract: { id: extractId, kind, storageKey }, layout, progress: reading(sizeBytes, progress),
  });
  await progress({ done: sizeBytes, total: sizeBytes, message: `Rows read: ${count.format(rowsRead)}. Comparing them` });
  await keepIssues(em, { extractId, issues: log.kept });
  const rowsUsable = await checkTogether({ em, table, extractId, log, notes, keep: true, definition });
  // Before comparing: what is loaded between the two makes it another.
  const changesAsOf = (await definition.standing?.(em)) ?? null;
  const changes = await definition.compare({ em, table });
  const weeks = await weeksOf({ em, table, definition, changes });
  const extract = await lockCheckable(em, extractId);
  extract.rowsRead = rowsRead;
  extract.rowsUsable = rowsUsable;
  extract.errorCount = log.total("error");
  extract.warningCount = log.total("warning");
  extract.issueCounts = log.byRule();
  extract.firstWeek = weeks?.first ?? null;
  extract.lastWeek = weeks?.last ?? null;
  extract.changes = changes;
  extract.changesAsOf = changesAsOf;
  extract.unknownCodes = notes.unknownCodes();
  extract.state = rowsUsable > 0 ? "checked" : "unusable";
  extract.failure = rowsUsable > 0 ? null : noUsableRow(rowsRead);
  extract.checkedAt = services.now();
  await noticeChecked(em, services, extract);
}

type Staged = { em: EntityManager; table: string; definition: KindDefinition; changes: ExtractChanges };

/** First and last week of the usable rows; null for kinds without weeks. */
async function weeksOf({ em, table, definition: { weekColumn }, changes: { weeks } }: Staged): Promise<{ first: string | null; last: string | null } | null> {
  if (weekColumn === undefined) return null;
  const [first, last] = [weeks[0], weeks.at(-1)];
  return first && last ? { first: first.week, last: last.week } : weeksStaged(em, { table, column: weekColumn });
}

const reading = (sizeBytes: number, progress: Progress) => ({ readBytes, rowsRead, errors }: StagingProgress) =>
  progress({ done: readBytes, total: sizeBytes, message: `Rows read: ${count.format(rowsRead)}, with errors: ${count.format(errors)}` });

const noUsableRow = (rowsRead: number) => ({
  code: "no-usable-row",
  detail: rowsRead === 1 ? "The one row has an error; see the list." : `Each of the ${count.format(rowsRead)} rows has an error; see the list.`,
});

type Refusal = { em: EntityManager; services: Services; extractId: string; error: UnreadableFile };

async function setUnusable({ em, services, extractId, error }: Refusal): Promise<void> {
  const extract = await lockCheckable(em, extractId);
  await removeIssues(em, extractId);
  await dropStaging(em, extractId);
  Object.assign(extract, {
    state: "unusable", failure: { code: error.code, detail: error.message }, checkedAt: services.now(),
    rowsRead: null, rowsUsable: null, errorCount: null, warningCount: null, issueCounts: null, firstWeek: null, lastWeek: null, changes: null,
    unknownCodes: null,
  } satisfies Partial<Extract>);
  await noticeChecked(em, services, extract);
}

/** Puts an extract back to where it was before a check that broke down, with the reason. */
export function abandonCheck(services: Services, { extractId, error }: { extractId: string; error: { code: string; detail: string } }): Promise<void> {
  return services.orm.em.fork().transactional(async (em) => {
    const extract = await lockExtract(em, extractId);
    // Received still, where it was cancelled before a worker took it.
    if (extract?.state !== "checking" && extract?.state !== "received") return;
    extract.state = "received";
    extract.failure = error;
  });
}
