import { useMemo } from "react";
import type { ReactNode } from "react";
import { formatMultiplier } from "@/lib/format/number";
import { useElementWidth } from "@/lib/use-element-width";
import { ChartFrame } from "../frame/chart-frame";
import { LeftAxis } from "../parts/axes";
import type { StoreGroup } from "../parts/group-shape";
import { ratioTicks } from "../scale/ratio-ticks";
import { DotColumn } from "./dot-column";
import { dotLayout } from "./dot-layout";

export type LevelDot = { id: string; name: string; group: StoreGroup; estimate: number; lower: number; upper: number };
export type DotLevel = { value: string; label: string; dots: readonly LevelDot[]; chain: number | null };

export type LevelDotsProps = {
  title: string;
  heading?: ReactNode;
  levels: readonly DotLevel[];
  highlighted: string | null;
  onHighlight: (id: string) => void;
  legend?: ReactNode;
  height?: number;
};

/** Many stores' multipliers of a few levels: in each level the stores from weakest to strongest, the chain as a line. */
export const LevelDots = ({
  title,
  heading,
  levels,
  highlighted,
  onHighlight,
  legend,
  height = 420,
}: LevelDotsProps) => {
  const [plot, width] = useElementWidth<HTMLDivElement>(720);
  const layout = useMemo(() => dotLayout({ levels, width, height }), [levels, width, height]);
  const { y, margin, columns } = layout;
  const ticks = ratioTicks(y.domain[0], y.domain[1], 7).map((value) => ({
    value,
    label: formatMultiplier(value, { digits: value % 1 === 0 ? 0 : 1 }),
  }));
  const table = () => ({
    columns: ["Level", "Store", "Times without", "Lower", "Upper"],
    rows: levels.flatMap((level) =>
      level.dots.map((dot) => [level.label, dot.name, dot.estimate, dot.lower, dot.upper]),
    ),
    formats: [undefined, undefined, ...Array<(n: number) => string>(3).fill((n) => n.toFixed(3))],
  });
  return (
    <ChartFrame title={title} heading={heading} table={table} height={height} legend={legend}>
      <div ref={plot} style={{ height }} className="overflow-hidden">
        <svg width={width} height={height} role="img" aria-label={title}>
          <LeftAxis scale={y} ticks={ticks} left={margin.left} right={width - margin.right} />
          <line
            className="chart-reference"
            x1={margin.left}
            x2={width - margin.right}
            y1={y.toPixel(1)}
            y2={y.toPixel(1)}
          />
          {columns.map((column) => (
            <DotColumn
              key={column.value}
              column={column}
              y={y}
              foot={height - 14}
              highlighted={highlighted}
              onHighlight={onHighlight}
            />
          ))}
        </svg>
      </div>
    </ChartFrame>
  );
};
