import type { ExtractIssue } from "@shared/contract/extracts";
import type { CsvTable } from "@/lib/csv";

/** The list for those who keep the store system: where, what, why, and what to do. */
export const issuesCsv = (issues: readonly ExtractIssue[]): CsvTable => ({
  columns: ["line", "column", "value", "severity", "reason", "remedy"],
  rows: issues.map((issue) => [issue.line, issue.column, issue.value, issue.severity, issue.reason, issue.remedy]),
});
