import { infiniteQueryOptions } from "@tanstack/react-query";
import { listExtractIssues } from "@shared/contract/extracts";
import type { ExtractIssue } from "@shared/contract/extracts";
import { call } from "@/lib/api-client";
import type { IssueFilter } from "../view/issue-filter";

export const extractIssuesKey = (id: string) => ["extract", id, "issues"];

const pageSize = 200;
/** As many as one request may ask for. */
const exportPageSize = 1000;

const queryOf = ({ rule, severity }: IssueFilter) => ({ rule: rule ?? undefined, severity: severity ?? undefined });

/** What is wrong with the rows; of one rule or severity where one is chosen. */
export const extractIssuesQuery = (id: string, filter: IssueFilter) =>
  infiniteQueryOptions({
    queryKey: [...extractIssuesKey(id), filter],
    queryFn: ({ pageParam, signal }) =>
      call(listExtractIssues, {
        params: { id },
        query: { limit: pageSize, cursor: pageParam, ...queryOf(filter) },
        signal,
      }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });

/** The whole list, page after page, for a file to send to whoever keeps the store system. */
export const readAllIssues = async (id: string, filter: IssueFilter): Promise<ExtractIssue[]> => {
  const issues: ExtractIssue[] = [];
  let cursor: string | undefined;
  do {
    const page = await call(listExtractIssues, {
      params: { id },
      query: { limit: exportPageSize, cursor, ...queryOf(filter) },
    });
    issues.push(...page.items);
    cursor = page.nextCursor ?? undefined;
  } while (cursor);
  return issues;
};
