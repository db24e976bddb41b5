import type { EntityManager } from "@mikro-orm/postgresql";
import { z } from "zod";
import type { CheckRule, IssueCount } from "@shared/contract/extracts";
import { readCursor } from "../../../http/page-cursor";
import { rules } from "../check/rules";
import type { Extract, ExtractIssue } from "../extracts.entities";
import { findIssues, issueCountsOf, type IssueCursor, type IssueFilter } from "../extracts.repository";
import { getExtract, pageOf, type Page, type PageQuery } from "../extracts.service";

const issueCursor = z.object({ line: z.number().int(), id: z.number().int() });

/** What is wrong with rows, by line, with counts by rule. @throws ProblemError 404, or 422 for a cursor that is none. */
export async function listIssues(
  em: EntityManager, extractId: string, { cursor, limit, ...filter }: PageQuery & IssueFilter,
): Promise<Page<ExtractIssue> & { byRule: IssueCount[] }> {
  const extract = await getExtract(em, extractId);
  const found = await findIssues(em, { extractId, ...filter, after: readCursor(issueCursor, cursor), limit });
  const page = pageOf(found, limit, ({ line, id }) => ({ line, id }));
  return { ...page, byRule: await issueCountsOf(em, extract) };
}

/** Issues read at once while all are handed out. */
const issuesOfAPage = 2_000;

/** All that is listed of an extract, page by page so that memory stays flat, and the counts. @throws ProblemError 404. */
export async function readAllIssues(
  em: EntityManager, extractId: string, filter: IssueFilter,
): Promise<{ extract: Extract; pages: AsyncIterable<ExtractIssue[]>; byRule: IssueCount[] }> {
  const extract = await getExtract(em, extractId);
  const byRule = (await issueCountsOf(em, extract)).filter(({ rule, severity }) =>
    (filter.rule === undefined || rule === filter.rule) && (filter.severity === undefined || severity === filter.severity));
  return { extract, pages: pagesOf(em, extractId, filter), byRule };
}

async function* pagesOf(em: EntityManager, extractId: string, filter: IssueFilter): AsyncGenerator<ExtractIssue[]> {
  let after: IssueCursor | undefined;
  do {
    // A context of its own, which forgets the page with it.
    const found: ExtractIssue[] = await findIssues(em.fork(), { extractId, ...filter, after, limit: issuesOfAPage });
    const page = found.slice(0, issuesOfAPage);
    yield page;
    after = found.length > issuesOfAPage ? page.at(-1) : undefined;
  } while (after);
}

/** Everything that files are checked for, rules of one kind behind each other. */
export function listCheckRules(): CheckRule[] {
  return Object.entries(rules).map(([rule, { severity, about, reason, remedy }]) => ({ rule, severity, about, reason, remedy }));
}
