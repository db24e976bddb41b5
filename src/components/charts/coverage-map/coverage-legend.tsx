import { useId } from "react";
import { useChainFormat } from "@/lib/format/chain-format";
import { HatchPattern } from "../parts/hatching";
import { cellStates } from "./coverage-data";
import type { CellState } from "./coverage-data";
import { rowPaths } from "./coverage-layout";
import { StateMark } from "./coverage-marks";

const size = { width: 18, height: 20 };

export const stateWords: Record<CellState, { word: string; meaning: string }> = {
  there: { word: "there", meaning: "loaded" },
  thin: { word: "thin", meaning: "less than half of the rows usual for the store" },
  restated: { word: "restated", meaning: "a later file changed rows of an earlier one" },
  withdrawn: { word: "withdrawn", meaning: "what was loaded was taken back" },
  missing: { word: "missing", meaning: "the store was open, nothing is loaded" },
  closed: { word: "closed", meaning: "not yet opened, or closed for good" },
};

/** Each mark with its meaning and how many store-weeks have it. */
export const CoverageLegend = ({ counts }: { counts: Record<CellState, number> }) => {
  const hatch = useId();
  const format = useChainFormat();
  return (
    <ul className="flex flex-wrap gap-x-6 gap-y-1.5 text-sm text-muted">
      {cellStates.map((state) => (
        <li key={state} className="flex items-center gap-2">
          <svg width={size.width} height={size.height} aria-hidden="true" className="shrink-0">
            <defs>
              <HatchPattern id={hatch} />
            </defs>
            {rowPaths([state], size).map(([, paths]) => (
              <StateMark key={state} state={state} paths={paths} hatch={hatch} />
            ))}
          </svg>
          <span>
            <span className="font-medium text-ink">{stateWords[state].word}</span> {format.number(counts[state])}
            <span className="max-md:sr-only"> · {stateWords[state].meaning}</span>
          </span>
        </li>
      ))}
    </ul>
  );
};
