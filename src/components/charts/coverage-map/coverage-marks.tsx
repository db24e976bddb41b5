import { memo } from "react";
import type { CellState, CoverageStore } from "./coverage-data";
import { rowPaths } from "./coverage-layout";

/** Fills and strokes of each state's mark; `hatch` is the id of the drawing's pattern. */
const markClasses: Record<CellState, string> = {
  there: "fill-(--plan-bar)",
  thin: "fill-(--plan-bar)",
  restated: "fill-accent",
  withdrawn: "fill-none stroke-caution",
  missing: "fill-danger-soft stroke-danger",
  closed: "",
};

type MarkProps = { state: CellState; path: string; hatch: string };

export const StateMark = ({ state, path, hatch }: MarkProps) => (
  <path
    d={path}
    className={markClasses[state]}
    strokeWidth={state === "withdrawn" || state === "missing" ? 1.5 : undefined}
    fill={state === "closed" ? `url(#${hatch})` : undefined}
  />
);

type RowMarksProps = { store: CoverageStore; cell: number; height: number; hatch: string };

/** A store's weeks. Drawn anew only when the store or the size changes, not while a pointer moves over them. */
export const RowMarks = memo(({ store, cell, height, hatch }: RowMarksProps) => (
  <svg width={store.states.length * cell} height={height} className="block shrink-0" aria-hidden="true">
    {rowPaths(store.states, { width: cell, height }).map(([state, path]) => (
      <StateMark key={state} state={state} path={path} hatch={hatch} />
    ))}
  </svg>
));
RowMarks.displayName = "RowMarks";
