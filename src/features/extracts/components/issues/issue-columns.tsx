import type { ExtractIssue } from "@shared/contract/extracts";
import type { TableColumn } from "@/components/ui/data-table-columns";

/** An issue with what tells it from the others of the list. */
export type NumberedIssue = ExtractIssue & { id: string };

const line: TableColumn<NumberedIssue> = {
  id: "line",
  header: "Line",
  meaning: "Line in the file; the header is line 1.",
  value: (issue) => issue.line,
  align: "right",
  width: "min(5.5rem, 16vw)",
};

const column: TableColumn<NumberedIssue> = {
  id: "column",
  header: "Column",
  value: (issue) => issue.column,
  cell: (issue) => <code className="text-sm break-words">{issue.column}</code>,
  width: "10rem",
  from: "sm",
};

const value: TableColumn<NumberedIssue> = {
  id: "value",
  header: "Value",
  value: (issue) => issue.value,
  cell: (issue) =>
    issue.value === "" ? <span className="text-muted">empty</span> : <code className="text-sm break-all">{issue.value}</code>,
  width: "min(13rem, 22vw)",
  sortable: false,
};

const reason: TableColumn<NumberedIssue> = {
  id: "reason",
  header: "What is wrong",
  value: (issue) => issue.reason,
  cell: (issue) => (
    <>
      <span className={issue.severity === "error" ? "text-ink" : "text-caution"}>{issue.reason}</span>
      <span className="block text-sm text-muted">{issue.remedy}</span>
    </>
  ),
};

/** Where, what and why. */
export const issueColumns = [line, column, value, reason];
