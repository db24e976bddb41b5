import { memo } from "react";
import type { Scale } from "../scale/scale";
import { labelledPast } from "./week-layout";
import type { PastWeek, WeekLayout } from "./week-layout";

type PastBarsProps = { weeks: readonly PastWeek[]; bars: WeekLayout["past"]; y: Scale; foot: number };

/** Weeks that were. They stay as they are while the plan moves. */
export const PastBars = memo(function PastBars({ weeks, bars, y, foot }: PastBarsProps) {
  const zero = y.toPixel(0);
  return (
    <g>
      {bars.map((bar) => {
        const units = weeks[bar.index].units;
        if (units === null) return null;
        const top = y.toPixel(Math.max(0, units));
        return (
          <rect
            key={bar.week}
            data-week={bar.week}
            x={bar.left}
            y={Math.min(top, zero - 1)}
            width={bar.width}
            // A week that sold nothing is seen to have been recorded.
            height={Math.max(1, zero - top)}
            rx={Math.min(2, bar.width / 4)}
            fill="var(--history-bar)"
          />
        );
      })}
      {labelledPast(bars).map((bar) => (
        <text key={bar.week} className="chart-text" x={bar.middle} y={foot - 9} textAnchor="middle">
          {bar.label}
        </text>
      ))}
    </g>
  );
});
