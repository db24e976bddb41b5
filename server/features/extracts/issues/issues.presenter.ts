import { csvLines, type CsvCell } from "@shared/csv";
import type * as contract from "@shared/contract/extracts";
import type { ExtractIssue } from "../extracts.entities";

export function presentIssue(issue: ExtractIssue): contract.ExtractIssue {
  const { line, column, value, severity, rule, reason, remedy } = issue;
  return { line, column, value, severity, rule, reason, remedy };
}

const columns = ["line", "column", "value", "severity", "reason", "remedy"];

/** The first line of the list as CSV. */
export const issuesCsvHeader = csvLines([columns]);

export const presentIssuesCsv = (issues: readonly ExtractIssue[]): string =>
  csvLines(issues.map(({ line, column, value, severity, reason, remedy }): CsvCell[] => [line, column, value, severity, reason, remedy]));

/** Says at the end of the list of which rules it holds the first issues only. */
export const presentUnlisted = (counts: readonly contract.IssueCount[]): string =>
  csvLines(counts.filter(({ count, listed }) => count > listed).map(({ severity, reason, remedy, count, listed }): CsvCell[] =>
    [null, null, null, severity, `${reason}: ${count - listed} more, not listed`, remedy]));
