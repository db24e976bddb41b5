import type { IssueCount } from "@shared/contract/extracts";

/** Which of what is wrong is looked at; null is all. */
export type IssueFilter = { rule: string | null; severity: "error" | "warning" | null };

export const everyIssue: IssueFilter = { rule: null, severity: null };

/** Reads the filter from an address; what is not one counts as none. */
export const readIssueFilter = (search: URLSearchParams): IssueFilter => {
  const severity = search.get("severity");
  return { rule: search.get("rule"), severity: severity === "error" || severity === "warning" ? severity : null };
};

/** Rules that rows broke: errors before warnings, the most frequent first. */
export const orderCounts = (counts: readonly IssueCount[], severity: IssueFilter["severity"]): IssueCount[] =>
  counts
    .filter((count) => severity === null || count.severity === severity)
    .sort((one, other) => one.severity.localeCompare(other.severity) || other.count - one.count);
