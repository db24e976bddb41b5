import type { YearSpan } from "./year-spans";

/** A year narrower than its name shows only where it begins. */
const namePixels = 30;

/** The years under the weeks' names, each from a mark where it begins. */
export const WeekYears = ({ spans, foot }: { spans: readonly YearSpan[]; foot: number }) => (
  <g data-part="years">
    {spans.map(({ year, left, right }, index) => (
      <g key={year}>
        {index > 0 && <line className="chart-axis" x1={left - 1} x2={left - 1} y1={foot - 16} y2={foot} />}
        {(right - left >= namePixels || index === spans.length - 1) && (
          <text className="chart-text" x={left + 3} y={foot - 4}>
            {year}
          </text>
        )}
      </g>
    ))}
  </g>
);
