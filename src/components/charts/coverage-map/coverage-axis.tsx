import type { Mark, WeekNumber } from "./coverage-layout";
import { calendarMarks } from "./coverage-layout";

export const axisHeight = 44;
/** A week's number needs so much room. */
const numberPixels = 24;
const quarterPixels = 26;

type CoverageAxisProps = { numbers: readonly WeekNumber[]; cell: number };

/** Years and quarters over the weeks, and the numbers of those weeks for which there is room. */
export const CoverageAxis = ({ numbers, cell }: CoverageAxisProps) => {
  const marks = calendarMarks(numbers);
  const every = Math.max(1, Math.ceil(numberPixels / cell));
  const roomOf = (mark: Mark, at: number) => ((marks[at + 1]?.week ?? numbers.length) - mark.week) * cell;
  return (
    <svg width={numbers.length * cell} height={axisHeight} className="block shrink-0" aria-hidden="true">
      {marks.map((mark, at) => (
        <g key={mark.week}>
          {mark.week > 0 && (
            <line
              className={mark.isYear ? "stroke-control" : "chart-axis"}
              x1={mark.week * cell} x2={mark.week * cell} y1={mark.isYear ? 2 : 10} y2={axisHeight}
            />
          )}
          {roomOf(mark, at) >= quarterPixels && (
            <text className={mark.isYear ? "chart-text-strong" : "chart-text"} x={mark.week * cell + 4} y={16}>
              {mark.isYear && roomOf(mark, at) >= 64 ? `${numbers[mark.week].year} ${mark.label}` : mark.label}
            </text>
          )}
        </g>
      ))}
      {numbers.map(({ week }, at) =>
        (numbers.length - 1 - at) % every === 0 ? (
          <text key={at} className="chart-text" x={(at + 0.5) * cell} y={37} textAnchor="middle">
            {week}
          </text>
        ) : null,
      )}
    </svg>
  );
};
