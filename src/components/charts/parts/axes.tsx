import type { LabelledTick } from "../scale/month-ticks";
import { labelsThatFit } from "../scale/place-labels";
import type { Scale } from "../scale/scale";

type LeftAxisProps = { scale: Scale; ticks: readonly LabelledTick[]; left: number; right: number };

/** Values at the left with a hairline across at each. */
export const LeftAxis = ({ scale, ticks, left, right }: LeftAxisProps) => (
  <g aria-hidden="true">
    {ticks.map((tick) => (
      <g key={tick.value} transform={`translate(0 ${scale.toPixel(tick.value)})`}>
        <line className="chart-grid" x1={left} x2={right} />
        <text className="chart-text" x={left - 8} y={4} textAnchor="end">
          {tick.label}
        </text>
      </g>
    ))}
  </g>
);

type BottomAxisProps = { scale: Scale; ticks: readonly LabelledTick[]; y: number; marks?: boolean };

/** Values along the foot; a short mark at every tick, labels as many as fit. */
export const BottomAxis = ({ scale, ticks, y, marks = true }: BottomAxisProps) => {
  const labelled = labelsThatFit(ticks, scale);
  return (
    <g aria-hidden="true" transform={`translate(0 ${y})`}>
      {marks &&
        ticks.map((tick) => {
          const x = scale.toPixel(tick.value);
          return <line key={tick.value} className="chart-axis" x1={x} x2={x} y1={0} y2={4} />;
        })}
      {labelled.map((tick) => (
        <text key={tick.value} className="chart-text" x={scale.toPixel(tick.value)} y={20} textAnchor="middle">
          {tick.label}
        </text>
      ))}
    </g>
  );
};
