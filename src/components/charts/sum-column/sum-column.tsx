import { useMemo } from "react";
import type { ReactNode } from "react";
import { useElementWidth } from "@/lib/use-element-width";
import { ChartFrame } from "../frame/chart-frame";
import { LeftAxis } from "../parts/axes";
import { Whisker } from "../parts/whisker";
import { roundTicks } from "../scale/round-ticks";
import { sumBars, sumScale } from "./sum-layout";
import type { SumBar, SumPart } from "./sum-layout";

export type SumColumnProps = {
  title: string;
  heading?: ReactNode;
  parts: readonly SumPart[];
  /** Of the total. */
  interval?: { lower: number; upper: number; level: number };
  format: (units: number) => string;
  formatSigned: (units: number) => string;
  height?: number;
};

const margin = { top: 26, right: 4, bottom: 26, left: 50 };

/** The sum made visible: from base through each driver's units to the plan, with the plan's interval. */
export const SumColumn = ({ title, heading, parts, interval, format, formatSigned, height = 268 }: SumColumnProps) => {
  const [plot, width] = useElementWidth<HTMLDivElement>(340);
  const { y, bars, ticks } = useMemo(() => {
    const scale = sumScale({ parts, interval, range: [height - margin.bottom, margin.top] });
    return {
      y: scale,
      bars: sumBars({ parts, y: scale, left: margin.left, right: width - margin.right }),
      ticks: roundTicks(scale.domain[0], scale.domain[1], 5),
    };
  }, [parts, interval, height, width]);
  const table = () => ({
    columns: ["Part", "Units", ...(interval ? ["Lower", "Upper"] : [])],
    rows: parts.map((part) => [
      part.label,
      part.units,
      ...(interval ? (part.kind === "total" ? [interval.lower, interval.upper] : [null, null]) : []),
    ]),
    formats: [undefined, format, format, format],
  });
  return (
    <ChartFrame title={title} heading={heading} table={table} height={height}>
      <div ref={plot}>
        <svg width={width} height={height} role="img" aria-label={title}>
          <LeftAxis
            scale={y}
            ticks={ticks.map((value) => ({ value, label: format(value) }))}
            left={margin.left - 4}
            right={width - margin.right}
          />
          {bars.slice(0, -1).map((bar, index) => (
            <line
              key={bar.id}
              className="chart-reference"
              x1={bar.left + bar.width}
              x2={bars[index + 1].left}
              y1={bar.endY}
              y2={bar.endY}
            />
          ))}
          {bars.map((bar) => (
            <SumBarShape
              key={bar.id}
              bar={bar}
              foot={height}
              text={bar.kind === "step" ? formatSigned(bar.units) : format(bar.units)}
              clearance={bar.kind === "total" && interval ? y.toPixel(interval.upper) : bar.top}
            />
          ))}
          {interval && <TotalWhisker bars={bars} lower={y.toPixel(interval.lower)} upper={y.toPixel(interval.upper)} />}
        </svg>
      </div>
    </ChartFrame>
  );
};

type SumBarShapeProps = { bar: SumBar; foot: number; text: string; clearance: number };

const fillOf = (bar: SumBar) =>
  bar.driver ? "var(--driver)" : bar.kind === "total" ? "var(--accent)" : "var(--base-bar)";

const SumBarShape = ({ bar, foot, text, clearance }: SumBarShapeProps) => {
  const middle = bar.left + bar.width / 2;
  return (
    <g data-driver={bar.driver} data-part={bar.id}>
      <rect
        x={bar.left}
        y={bar.top}
        width={bar.width}
        height={Math.max(1, bar.bottom - bar.top)}
        rx={Math.min(3, (bar.bottom - bar.top) / 2)}
        fill={fillOf(bar)}
      />
      <text className="chart-text-strong chart-halo" x={middle} y={clearance - 7} textAnchor="middle">
        {text}
      </text>
      <text className="chart-text" x={middle} y={foot - 6} textAnchor="middle">
        {bar.label}
      </text>
    </g>
  );
};

const TotalWhisker = ({ bars, lower, upper }: { bars: readonly SumBar[]; lower: number; upper: number }) => {
  const total = bars.find((bar) => bar.kind === "total");
  return total ? <Whisker x={total.left + total.width / 2} lower={lower} upper={upper} cap={6} /> : null;
};
