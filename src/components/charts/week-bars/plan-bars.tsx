import { Whisker } from "../parts/whisker";
import type { Scale } from "../scale/scale";
import { labelEvery } from "./week-layout";
import type { PlanWeek, WeekBar } from "./week-layout";

type PlanBarsProps = {
  weeks: readonly PlanWeek[];
  bars: readonly WeekBar[];
  y: Scale;
  foot: number;
  selected: string | null;
};

/** The plan's weeks: bar, interval, and the base as a line across. */
export const PlanBars = ({ weeks, bars, y, foot, selected }: PlanBarsProps) => {
  const zero = y.toPixel(0);
  const every = bars.length > 1 ? labelEvery(bars[1].left - bars[0].left, 42) : 1;
  return bars.map((bar, index) => {
    const week = weeks[index];
    const top = y.toPixel(week.units);
    const baseY = y.toPixel(week.base);
    const isSelected = week.week === selected;
    const overhang = Math.min(4, bar.width * 0.1);
    return (
      <g key={bar.week} data-week={bar.week}>
        <rect
          x={bar.left}
          y={top}
          width={bar.width}
          height={zero - top}
          rx="2.5"
          fill={isSelected ? "var(--accent)" : "var(--plan-bar)"}
        />
        <line
          x1={bar.left - overhang}
          x2={bar.left + bar.width + overhang}
          y1={baseY}
          y2={baseY}
          stroke="var(--sheet)"
          strokeWidth="4"
          strokeOpacity="0.75"
        />
        <line
          x1={bar.left - overhang}
          x2={bar.left + bar.width + overhang}
          y1={baseY}
          y2={baseY}
          stroke="var(--ink)"
          strokeWidth="1.75"
          data-part="base"
        />
        <Whisker x={bar.middle} lower={y.toPixel(week.lower)} upper={y.toPixel(week.upper)} />
        {index % every === 0 && (
          <text
            className={isSelected ? "chart-text-strong" : "chart-text"}
            x={bar.middle}
            y={foot - 9}
            textAnchor="middle"
          >
            {week.label}
          </text>
        )}
      </g>
    );
  });
};
