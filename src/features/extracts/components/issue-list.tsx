import { useInfiniteQuery } from "@tanstack/react-query";
import { FileDown } from "lucide-react";
import { useMemo, useState } from "react";
import type { Extract, ExtractIssue } from "@shared/contract/extracts";
import { Button } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { EmptyState } from "@/components/ui/empty-state";
import { ErrorState } from "@/components/ui/error-state";
import { Sheet } from "@/components/ui/sheet";
import { LoadingState } from "@/components/ui/skeleton";
import { useStatusLine } from "@/components/ui/status-line";
import { saveCsv } from "@/lib/download";
import { extractIssuesQuery, readAllIssues } from "../api/extract-issues";
import { issuesCsv } from "../view/issues-csv";
import { IssueRules } from "./issue-rules";

type Numbered = ExtractIssue & { id: string };

const columns: TableColumn<Numbered>[] = [
  {
    id: "line",
    header: "Line",
    meaning: "Line in the file; the header is line 1.",
    value: (issue) => issue.line,
    align: "right",
    width: "5.5rem",
  },
  {
    id: "column",
    header: "Column",
    value: (issue) => issue.column,
    cell: (issue) => <code className="text-sm">{issue.column}</code>,
    width: "9rem",
    from: "sm",
  },
  {
    id: "value",
    header: "Value",
    value: (issue) => issue.value,
    cell: (issue) =>
      issue.value === "" ? (
        <span className="text-muted">empty</span>
      ) : (
        <code className="text-sm break-all">{issue.value}</code>
      ),
    width: "12rem",
    sortable: false,
  },
  {
    id: "reason",
    header: "What is wrong",
    value: (issue) => issue.reason,
    cell: (issue) => (
      <>
        <span className={issue.severity === "error" ? "text-ink" : "text-caution"}>{issue.reason}</span>
        <span className="block text-sm text-muted">{issue.remedy}</span>
      </>
    ),
  },
];

type IssueListProps = { extract: Extract; rule: string | null; onRule: (rule: string | null) => void };

/** What is wrong with the file, line by line, by rule, and as a file to send on. */
export const IssueList = ({ extract, rule, onRule }: IssueListProps) => {
  const query = useInfiniteQuery(extractIssuesQuery(extract.id, rule));
  const [isSaving, setSaving] = useState(false);
  const status = useStatusLine();
  const issues = useMemo(
    () =>
      (query.data?.pages ?? []).flatMap((page) => page.items).map((issue, index) => ({ ...issue, id: String(index) })),
    [query.data],
  );
  const counts = query.data?.pages[0]?.byRule ?? [];
  const isUnknown = rule !== null && !counts.some((count) => count.rule === rule);
  const save = async () => {
    setSaving(true);
    try {
      saveCsv(issuesCsv(await readAllIssues(extract.id, rule)), `${extract.fileName} what is wrong`);
    } catch {
      status.failed("The list could not be read to its end. Try again.");
    } finally {
      setSaving(false);
    }
  };
  if (query.isError && !query.data) {
    return (
      <ErrorState
        title="The list of issues could not be read"
        error={query.error}
        onRetry={() => void query.refetch()}
      />
    );
  }
  return (
    <Sheet
      flush
      heading="What is wrong, line by line"
      actions={
        !isUnknown && (
          <Button size="small" onClick={() => void save()} busy={isSaving}>
            <FileDown aria-hidden="true" /> Save as CSV
          </Button>
        )
      }
    >
      {query.isPending ? (
        <div className="p-5">
          <LoadingState label="Reading the list" />
        </div>
      ) : (
        <div className="grid grid-cols-[minmax(0,1fr)] border-t border-hairline lg:grid-cols-[19rem_minmax(0,1fr)]">
          <div className="border-hairline p-2 max-lg:border-b lg:border-r">
            <IssueRules counts={counts} chosen={rule} onChoose={onRule} />
          </div>
          <div className="min-w-0">
            {isUnknown ? (
              <EmptyState
                title={`There is no rule “${rule}” here`}
                action={<Button onClick={() => onRule(null)}>Show all rules</Button>}
              >
                No row of this file broke a rule of that name. The address may have lost a part on its way, or the file was checked again since.
              </EmptyState>
            ) : (
              <DataTable
                caption="Issues"
                rows={issues}
                columns={columns}
                rowKey={(issue) => issue.id}
                rowHeight={58}
                maxHeight={560}
              />
            )}
            {query.hasNextPage && (
              <div className="border-t border-hairline p-3 text-center">
                <Button size="small" onClick={() => void query.fetchNextPage()} busy={query.isFetchingNextPage}>
                  Show more
                </Button>
              </div>
            )}
          </div>
        </div>
      )}
    </Sheet>
  );
};
