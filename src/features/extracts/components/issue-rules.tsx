import type { IssueCount } from "@shared/contract/extracts";
import { useChainFormat } from "@/lib/format/chain-format";

type IssueRulesProps = {
  counts: readonly IssueCount[];
  chosen: string | null;
  onChoose: (rule: string | null) => void;
};

const rowStyle =
  "flex w-full items-baseline justify-between gap-3 rounded-sm px-3 py-2 text-left transition-colors hover:bg-hover aria-pressed:bg-accent-soft";

/** Each rule that rows broke, the worst first; pressing one shows its rows alone. */
export const IssueRules = ({ counts, chosen, onChoose }: IssueRulesProps) => {
  const format = useChainFormat();
  const ordered = [...counts].sort((a, b) => a.severity.localeCompare(b.severity) || b.count - a.count);
  const total = counts.reduce((sum, { count }) => sum + count, 0);
  return (
    <ul aria-label="What is wrong, by rule" className="flex flex-col gap-0.5">
      <li>
        <button type="button" aria-pressed={chosen === null} onClick={() => onChoose(null)} className={rowStyle}>
          <span className="font-medium">All</span>
          <span>{format.number(total)}</span>
        </button>
      </li>
      {ordered.map(({ rule, severity, reason, count }) => (
        <li key={`${rule} ${severity}`}>
          <button type="button" aria-pressed={chosen === rule} onClick={() => onChoose(rule)} className={rowStyle}>
            <span>
              <span className={severity === "error" ? "mr-2 font-medium text-danger" : "mr-2 font-medium text-caution"}>
                {severity === "error" ? "Error" : "Warning"}
              </span>
              {reason}
            </span>
            <span className="font-medium">{format.number(count)}</span>
          </button>
        </li>
      ))}
    </ul>
  );
};
