import { infiniteQueryOptions } from "@tanstack/react-query";
import { getExtractIssuesCsv, listExtractIssues } from "@shared/contract/extracts";
import { call, endpointAddress } from "@/lib/api-client";
import type { IssueFilter } from "../view/issue-filter";
import { extractQuery } from "./extract";

const pageSize = 200;

const queryOf = ({ rule, severity }: IssueFilter) => ({ rule: rule ?? undefined, severity: severity ?? undefined });

/** What is wrong with the rows; of one rule or severity where one is chosen. */
export const extractIssuesQuery = (id: string, filter: IssueFilter) =>
  infiniteQueryOptions({
    queryKey: [...extractQuery(id).queryKey, "issues", filter],
    queryFn: ({ pageParam, signal }) =>
      call(listExtractIssues, {
        params: { id },
        query: { limit: pageSize, cursor: pageParam, ...queryOf(filter) },
        signal,
      }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page) => page.nextCursor ?? undefined,
  });

/** Where the whole list is had as a file, to send to whoever keeps the store system. */
export const issuesCsvAddress = (id: string, filter: IssueFilter): string =>
  endpointAddress(getExtractIssuesCsv, { params: { id }, query: queryOf(filter) });
