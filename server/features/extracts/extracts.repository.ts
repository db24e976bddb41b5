import { LockMode } from "@mikro-orm/core";
import type { EntityManager } from "@mikro-orm/postgresql";
import type { ExtractChanges, IssueCount } from "@shared/contract/extracts";
import type { Layout } from "@shared/contract/layouts";
import type { UnknownCodes } from "@shared/contract/unknown-codes";
import { ExtractEntity, ExtractIssueEntity, type Extract, type ExtractIssue } from "./extracts.entities";

export function findExtract(em: EntityManager, id: string): Promise<Extract | null> {
  return em.findOne(ExtractEntity, { id }, { populate: ["uploadedBy", "savedLayout"] });
}

/** The extract as it is now, its row kept from others until the transaction ends: for short transactions, or at their end. */
export function lockExtract(em: EntityManager, id: string): Promise<Extract | null> {
  return em.findOne(ExtractEntity, { id }, { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true });
}

/**
 * Keeps other checks of an extract out until the transaction ends. Unlike a lock of its row this lets requests read and
 * refuse meanwhile, however long it takes.
 */
export async function lockCheck(em: EntityManager, id: string): Promise<void> {
  await em.execute("select pg_advisory_xact_lock(hashtextextended(?, 0))", [`shelftide check ${id}`]);
}

/** Lets sorting and joining sets of a million rows use memory instead of disk, until the transaction ends. */
export async function giveMemory(em: EntityManager): Promise<void> {
  await em.execute("set local work_mem = '64MB'");
}

/** Has what loading an extract would change worked out anew before it is loaded. */
export async function forgetStanding(em: EntityManager, id: string): Promise<void> {
  await em.execute("update extracts set changes_as_of = null where id = ?", [id]);
}

export type ExtractCursor = { uploadedAt: string; id: string };

/** Extracts, newest first, from after a cursor on; one more than the limit where there are more. */
export function findExtracts(em: EntityManager, { after, limit }: { after?: ExtractCursor; limit: number }): Promise<Extract[]> {
  const older = after && {
    $or: [
      { uploadedAt: { $lt: new Date(after.uploadedAt) } },
      { uploadedAt: new Date(after.uploadedAt), id: { $lt: after.id } },
    ],
  };
  return em.find(ExtractEntity, older ?? {}, {
    populate: ["uploadedBy", "savedLayout"], orderBy: { uploadedAt: "desc", id: "desc" }, limit: limit + 1,
  });
}

export type IssueCursor = { line: number; id: number };
/** `column` as issues name it, empty for the whole row. */
export type IssueFilter = { severity?: "error" | "warning"; rule?: string; column?: string };
type IssuePage = IssueFilter & { extractId: string; after?: IssueCursor; limit: number };

/** Issues by line, from after a cursor on; one more than the limit where there are more. */
export function findIssues(em: EntityManager, { extractId, severity, rule, column, after, limit }: IssuePage): Promise<ExtractIssue[]> {
  const where = {
    extract: extractId,
    ...(severity && { severity }),
    ...(rule && { rule }),
    ...(column !== undefined && { column }),
    ...(after && { $or: [{ line: { $gt: after.line } }, { line: after.line, id: { $gt: after.id } }] }),
  };
  return em.find(ExtractIssueEntity, where, { orderBy: { line: "asc", id: "asc" }, limit: limit + 1 });
}

export async function issueCountsOf(em: EntityManager, extract: Extract): Promise<IssueCount[]> {
  await em.populate(extract, ["issueCounts"]);
  // Checks of before it was counted have no `listed`.
  return (extract.issueCounts ?? []).map((counted) => ({ ...counted, listed: counted.listed ?? counted.count }));
}

export async function changesOf(em: EntityManager, extract: Extract): Promise<ExtractChanges | null> {
  await em.populate(extract, ["changes"]);
  return extract.changes ?? null;
}

/** The layout by which an extract is read; null where it is in our own form, or that is not known yet. */
export async function layoutInForceOf(em: EntityManager, extract: Extract): Promise<Layout | null> {
  await em.populate(extract, ["layoutInForce"]);
  return extract.layoutInForce ?? null;
}

/** Codes that the catalogue lacked when the file was checked; null before that. */
export async function unknownCodesOf(em: EntityManager, extract: Extract): Promise<UnknownCodes | null> {
  await em.populate(extract, ["unknownCodes"]);
  return extract.unknownCodes ?? null;
}

/** Removes what an earlier check has found. */
export async function removeIssues(em: EntityManager, extractId: string): Promise<void> {
  await em.nativeDelete(ExtractIssueEntity, { extract: extractId });
}

/** The weeks of which some extract that is loaded holds sales; told by the extracts, which are few, not by their rows. */
export async function findLoadedWeeks(em: EntityManager): Promise<string[]> {
  const rows = await em.execute<{ week: string }[]>(
    `select distinct w->>'week' as week from extracts e, jsonb_array_elements(e.changes->'weeks') w
     where e.kind = 'sales' and e.state = 'loaded'`,
  );
  return rows.map(({ week }) => week);
}
