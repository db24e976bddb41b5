import { useInfiniteQuery } from "@tanstack/react-query";
import { useMemo } from "react";
import type { ReactNode } from "react";
import type { Extract, IssueCount } from "@shared/contract/extracts";
import { Button } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import { EmptyState } from "@/components/ui/empty-state";
import { ErrorState } from "@/components/ui/error-state";
import { LoadingState } from "@/components/ui/skeleton";
import { useChainFormat } from "@/lib/format/chain-format";
import { extractIssuesQuery } from "../../api/extract-issues";
import { everyIssue } from "../../view/issue-filter";
import type { IssueFilter } from "../../view/issue-filter";
import { issueColumns } from "./issue-columns";
import { IssueRules } from "./issue-rules";
import { SaveIssues } from "./save-issues";

type IssueListProps = {
  extract: Extract;
  filter: IssueFilter;
  onFilter: (filter: IssueFilter) => void;
  /** Stands beside the button that saves the list. */
  actions?: ReactNode;
};

/** What is wrong with the file, by reason and line by line, and as a file to send on. */
export const IssueList = ({ extract, filter, onFilter, actions }: IssueListProps) => {
  const query = useInfiniteQuery(extractIssuesQuery(extract.id, filter));
  const issues = useMemo(
    () =>
      (query.data?.pages ?? []).flatMap((page) => page.items).map((issue, index) => ({ ...issue, id: String(index) })),
    [query.data],
  );
  if (query.isError && !query.data) {
    return (
      <ErrorState title="The list of issues could not be read" error={query.error} onRetry={() => void query.refetch()} />
    );
  }
  if (query.isPending) {
    return (
      <div className="p-5">
        <LoadingState label="Reading the list" />
      </div>
    );
  }
  const counts = query.data.pages[0]?.byRule ?? [];
  const isUnknown = filter.rule !== null && !counts.some((count) => count.rule === filter.rule);
  return (
    <div className="grid grid-cols-[minmax(0,1fr)] lg:grid-cols-[20rem_minmax(0,1fr)]">
      <div className="border-hairline p-2 max-lg:border-b lg:border-r">
        <IssueRules counts={counts} filter={filter} onFilter={onFilter} />
      </div>
      <div className="min-w-0">
        {isUnknown ? (
          <EmptyState
            title={`There is no rule “${filter.rule}” here`}
            action={<Button onClick={() => onFilter(everyIssue)}>Show all rules</Button>}
          >
            No row of this file broke a rule of that name. The address may have lost a part on its way, or the file was checked again since.
          </EmptyState>
        ) : (
          <>
            <div className="flex items-start justify-between gap-3 border-b max-sm:flex-col border-hairline p-3 sm:px-5">
              <Shown counts={counts} filter={filter} />
              <div className="flex gap-2">
                {actions}
                <SaveIssues extract={extract} filter={filter} />
              </div>
            </div>
            <DataTable
              caption="Issues"
              rows={issues}
              columns={issueColumns}
              rowKey={(issue) => issue.id}
              rowHeight={58}
              maxHeight={560}
            />
          </>
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
  );
};

/** What the lines are of, what to do about it, and whether all of them stand here. */
const Shown = ({ counts, filter }: { counts: readonly IssueCount[]; filter: IssueFilter }) => {
  const format = useChainFormat();
  const chosen = counts.filter(({ rule, severity }) => (filter.rule ?? rule) === rule && (filter.severity ?? severity) === severity);
  const sum = (of: "count" | "listed") => chosen.reduce((total, count) => total + count[of], 0);
  const only = filter.rule === null ? null : chosen[0];
  const isCut = sum("listed") < sum("count");
  return (
    <div className="min-w-0 flex-1">
      <p className="font-medium">{only ? only.reason : "Line by line"}</p>
      <p className="text-sm text-muted">
        {only && `${only.remedy} `}
        {isCut && `Of ${format.number(sum("count"))} the first ${format.number(sum("listed"))} are kept as lines; the counts are exact.`}
        {!only && !isCut && "Lines are counted as in the file; the header is line 1."}
      </p>
    </div>
  );
};
