import { memo } from "react";
import type { CellState, CoverageStore } from "./coverage-data";
import { rowPaths } from "./coverage-layout";
import type { MarkPaths } from "./coverage-layout";

/** Colours of each state's mark. */
const grounds: Record<CellState, string> = {
  there: "fill-(--plan-bar)",
  thin: "fill-(--plan-bar)",
  restated: "fill-accent",
  withdrawn: "",
  missing: "fill-danger-soft",
  closed: "",
};
const lines: Partial<Record<CellState, string>> = { withdrawn: "fill-none stroke-caution", missing: "fill-none stroke-danger" };

type MarkProps = { state: CellState; paths: MarkPaths; /** Id of the drawing's pattern. */ hatch: string };

export const StateMark = ({ state, paths: { ground, line }, hatch }: MarkProps) => (
  <>
    {ground && <path d={ground} className={grounds[state]} fill={state === "closed" ? `url(#${hatch})` : undefined} />}
    {line && <path d={line} className={lines[state]} strokeWidth={1.5} shapeRendering="auto" />}
  </>
);

type RowMarksProps = { store: CoverageStore; cell: number; height: number; hatch: string };

/** A store's weeks. Drawn anew only when the store or the size changes, not while a pointer moves over them. */
export const RowMarks = memo(({ store, cell, height, hatch }: RowMarksProps) => (
  <svg width={store.states.length * cell} height={height} shapeRendering="crispEdges" className="block shrink-0" aria-hidden="true">
    {rowPaths(store.states, { width: cell, height }).map(([state, paths]) => (
      <StateMark key={state} state={state} paths={paths} hatch={hatch} />
    ))}
  </svg>
));
RowMarks.displayName = "RowMarks";
