import type { CellState } from "./coverage-data";
import { stateWords } from "./coverage-legend";

/** What is to say of a cell. */
export type CellFacts = {
  store: string;
  week: string;
  state: CellState;
  rows: string | null;
  file: number | null;
  fileName: string | null;
};

/** A cell as it is spoken: "Ashgill, week 23, 2026 (1–7 June 2026): there, 432 rows, from sales.csv". */
export const cellLabel = ({ store, week, state, rows, fileName }: CellFacts): string => {
  const facts = [stateWords[state].word, rows, fileName && `${state === "withdrawn" ? "was" : "from"} ${fileName}`];
  return `${store}, ${week}: ${facts.filter(Boolean).join(", ")}`;
};

type CellTipProps = { facts: CellFacts; x: number; y: number; side: "left" | "right" };

const tipStyle =
  "pointer-events-none absolute z-30 w-max max-w-60 rounded-sm bg-ink px-2.5 py-1.5 text-sm text-sheet shadow-raised";

/** The same, beside the cell that is looked at. */
export const CellTip = ({ facts, x, y, side }: CellTipProps) => (
  <div
    aria-hidden="true"
    className={tipStyle}
    style={{ left: x, top: y, transform: side === "left" ? "translate(calc(-100% - 10px), -50%)" : "translate(10px, -50%)" }}
  >
    <p className="font-semibold">{facts.store}</p>
    <p>{facts.week}</p>
    <p>
      {stateWords[facts.state].word}: {stateWords[facts.state].meaning}
      {facts.rows && `, ${facts.rows}`}
    </p>
    {facts.fileName && <p className="break-all opacity-80">{facts.fileName} – press to open</p>}
  </div>
);
