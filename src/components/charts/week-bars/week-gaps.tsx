import type { PastWeek, WeekLayout } from "./week-layout";

type WeekGapsProps = { weeks: readonly PastWeek[]; bars: WeekLayout["past"]; top: number; bottom: number };

/** Weeks of which nothing was recorded: a band where the bar would stand, so that none looks like a week without sales. */
export const WeekGaps = ({ weeks, bars, top, bottom }: WeekGapsProps) => {
  const place = bars.length > 1 ? bars[1].left - bars[0].left : (bars[0]?.width ?? 0);
  return (
    <g aria-hidden="true">
      {bars.map((bar) =>
        weeks[bar.index].units === null ? (
          <rect
            key={bar.week}
            data-gap={bar.week}
            x={bar.middle - place / 2}
            y={top}
            width={place}
            height={bottom - top}
            fill="var(--muted)"
            fillOpacity="0.22"
          />
        ) : null,
      )}
    </g>
  );
};

/** Says what the bands mean, in words that hold for one as for many. */
export const GapNote = () => (
  <span className="flex items-center gap-2 text-sm text-muted">
    <span aria-hidden="true" className="inline-block h-4 w-3 bg-muted/22" />
    nothing recorded in that week
  </span>
);
