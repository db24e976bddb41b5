import type { IssueCount } from "@shared/contract/extracts";
import { useChainFormat } from "@/lib/format/chain-format";
import { everyIssue, orderCounts } from "../../view/issue-filter";
import type { IssueFilter } from "../../view/issue-filter";

type IssueRulesProps = {
  counts: readonly IssueCount[];
  filter: IssueFilter;
  onFilter: (filter: IssueFilter) => void;
};

const rowStyle =
  "flex w-full items-baseline justify-between gap-3 rounded-sm px-3 py-2 text-left transition-colors hover:bg-hover aria-pressed:bg-accent-soft";

const sumOf = (counts: readonly IssueCount[]) => counts.reduce((sum, { count }) => sum + count, 0);

const headings = { error: "Errors keep a row out", warning: "Warnings do not" };

/** Each rule that rows broke, errors first; pressing one shows its rows alone. */
export const IssueRules = ({ counts, filter, onFilter }: IssueRulesProps) => {
  const format = useChainFormat();
  return (
    <div role="group" aria-label="What is wrong, by reason">
      <button
        type="button"
        aria-pressed={filter.rule === null && filter.severity === null}
        onClick={() => onFilter(everyIssue)}
        className={rowStyle}
      >
        <span className="font-medium">All</span>
        <span>{format.number(sumOf(counts))}</span>
      </button>
      {(["error", "warning"] as const).map((severity) => {
        const own = orderCounts(counts, severity);
        if (own.length === 0) return null;
        return (
          <div key={severity} className="mt-2 border-t border-hairline pt-2">
            <button
              type="button"
              aria-pressed={filter.rule === null && filter.severity === severity}
              onClick={() => onFilter({ rule: null, severity })}
              className={rowStyle}
            >
              <span className={severity === "error" ? "font-medium text-danger" : "font-medium text-caution"}>{headings[severity]}</span>
              <span className="font-medium">{format.number(sumOf(own))}</span>
            </button>
            <ul className="flex flex-col gap-0.5">
              {own.map(({ rule, reason, count }) => (
                <li key={rule}>
                  <button
                    type="button"
                    aria-pressed={filter.rule === rule}
                    onClick={() => onFilter({ rule, severity: null })}
                    className={rowStyle}
                  >
                    <span>{reason}</span>
                    <span>{format.number(count)}</span>
                  </button>
                </li>
              ))}
            </ul>
          </div>
        );
      })}
    </div>
  );
};
