import type { CoverageRow } from "./coverage-data";

type RowNameProps = { row: CoverageRow; width: number; height: number; isLookedAt: boolean };

/** Roughly what a letter takes; longer names are cut so that they end before the cells begin. */
const letterPixels = 6.6;

const cut = (name: string, width: number): string => {
  const most = Math.floor((width - 20) / letterPixels);
  return name.length > most ? `${name.slice(0, most - 1).trimEnd()}…` : name;
};

/** Stays at the left while the weeks move under it. Drawn, so that it stands in a saved picture too. */
export const RowName = ({ row, width, height, isLookedAt }: RowNameProps) => (
  <svg width={width} height={height} className="sticky left-0 z-10 -order-1 block shrink-0">
    <rect width={width} height={height} className={isLookedAt ? "fill-hover" : "fill-sheet"} />
    <line className="stroke-hairline" x1={width - 0.5} x2={width - 0.5} y1={0} y2={height} />
    {row.kind === "region" ? (
      <text className="chart-text-strong" x={12} y={height - 6}>
        {cut(row.name, width - 28)}
        <tspan className="fill-muted font-normal" dx={6}>
          {row.stores}
        </tspan>
      </text>
    ) : (
      <text className="chart-text" x={12} y={height / 2 + 4}>
        {cut(row.store.name, width)}
        <title>{row.store.name}</title>
      </text>
    )}
  </svg>
);
