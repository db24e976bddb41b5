import { useMemo } from "react";
import type { ReactNode } from "react";
import { useElementWidth } from "@/lib/use-element-width";
import { ChartFrame } from "../frame/chart-frame";
import { LeftAxis } from "../parts/axes";
import { roundTicks } from "../scale/round-ticks";
import { PastBars } from "./past-bars";
import { PlanBars } from "./plan-bars";
import { WeekChoices } from "./week-choices";
import { GapNote, WeekGaps } from "./week-gaps";
import { weekLayout } from "./week-layout";
import type { PastWeek, PlanWeek } from "./week-layout";
import { WeekYears } from "./week-years";
import { yearSpans, yearsHeight } from "./year-spans";

export type WeekBarsProps = {
  title: string;
  heading?: ReactNode;
  past: readonly PastWeek[];
  plan: readonly PlanWeek[];
  /** The plan week looked at. */
  selected: string | null;
  onSelect: (week: string) => void;
  format: (units: number) => string;
  legend?: ReactNode;
  height?: number;
};

const margin = { top: 12, right: 4, bottom: 28, left: 50 };

/** Units week by week: what was, in grey; what the plan gives, each with its interval and the base across it. */
export const WeekBars = (props: WeekBarsProps) => {
  const { title, heading, past, plan, selected, onSelect, format, legend, height = 216 } = props;
  const [plot, width] = useElementWidth<HTMLDivElement>(900);
  const { layout, years } = useMemo(() => {
    const at = (foot: number) =>
      weekLayout({
        past,
        plan,
        left: margin.left,
        right: width - margin.right,
        range: [foot - margin.bottom, margin.top],
      });
    const whole = at(height);
    // Which weeks there is room for, and so their years, does not depend on the height.
    const spans = yearSpans([...whole.past, ...whole.plan]);
    return { layout: spans.length === 0 ? whole : at(height - yearsHeight), years: spans };
  }, [past, plan, width, height]);
  const foot = height - (years.length === 0 ? 0 : yearsHeight);
  const axis = foot - margin.bottom;
  const { y, dividerX } = layout;
  const hasGap = layout.past.some((bar) => past[bar.index].units === null);
  const ticks = roundTicks(y.domain[0], y.domain[1], 5).map((value) => ({ value, label: format(value) }));
  const table = () => ({
    columns: ["Week", "Units", "Lower", "Upper", "Base units"],
    rows: [
      ...past.map((week) => [week.week, week.units, null, null, null]),
      ...plan.map((week) => [week.week, week.units, week.lower, week.upper, week.base]),
    ],
    formats: [undefined, format, format, format, format],
  });
  return (
    <ChartFrame title={title} heading={heading} table={table} height={height} legend={hasGap ? <>{legend}<GapNote /></> : legend}>
      <div ref={plot} className="relative" style={{ height }}>
        <WeekChoices bars={layout.plan} selected={selected} onSelect={onSelect} height={height} />
        <svg
          width={width}
          height={height}
          className="pointer-events-none absolute inset-0"
          role="img"
          aria-label={title}
        >
          <LeftAxis scale={y} ticks={ticks} left={margin.left - 4} right={width - margin.right} />
          <WeekGaps weeks={past} bars={layout.past} top={margin.top} bottom={axis} />
          <PastBars weeks={past} bars={layout.past} y={y} foot={foot} />
          {dividerX !== null && (
            <line className="chart-reference" x1={dividerX} x2={dividerX} y1={margin.top} y2={axis} />
          )}
          <PlanBars weeks={plan} bars={layout.plan} y={y} foot={foot} selected={selected} />
          <WeekYears spans={years} foot={height} />
        </svg>
      </div>
    </ChartFrame>
  );
};
