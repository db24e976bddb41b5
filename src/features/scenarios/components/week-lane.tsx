import { useMemo } from "react";
import { laneCurve } from "@shared/planning";
import { yearFraction } from "@shared/calendar";
import { DriverLane } from "@/components/charts/driver-lane/driver-lane";
import { monthTicks } from "@/components/charts/scale/month-ticks";
import { unseenRanges } from "@/components/charts/scale/unseen-ranges";
import { capitalised } from "@/lib/format/capitalised";
import { useChainFormat } from "@/lib/format/chain-format";
import { lanePoints, supportFor, axisValues } from "../view/lane-points";
import { nearestWeek } from "../view/nearest-week";
import { seenValues } from "../view/seen-values";
import type { BenchProps } from "./bench-lanes";
import { UnlearntLane } from "./unlearnt-lane";

const wholeYear = { min: 0, max: 1, step: 1 / 52.18 };
const ticks = monthTicks();

/** The time of year. Its handle picks the plan week looked at; it never moves the plan. */
export const WeekLane = ({ figures, level, week, onWeek }: BenchProps) => {
  const format = useChainFormat();
  const { laneStores, prediction } = figures;
  const still = useMemo(() => {
    const x = axisValues(0, 1);
    const curve = laneCurve({ stores: laneStores, driver: "season", level, at: x });
    if (!curve) return null;
    return { points: lanePoints(curve), unseen: unseenRanges(x, supportFor(curve)), seen: seenValues(laneStores, "season") };
  }, [laneStores, level]);
  if (!still) return <UnlearntLane driver="week" label="Week of year" />;

  const weeks = prediction.weeks.map((row) => row.week);
  const here = yearFraction(week);
  const multiplier = Math.exp(laneCurve({ stores: laneStores, driver: "season", level, at: [here] })?.estimate[0] ?? 0);
  const label = format.week(week);
  return (
    <DriverLane
      driver="week"
      label="Week looked at"
      name="Week of year"
      title="Demand by week of year, relative to a usual week"
      {...still}
      steps={wholeYear}
      ticks={ticks}
      value={here}
      baseline={null}
      onChange={(fraction) => onWeek(nearestWeek(weeks, { fraction, from: week }))}
      format={() => capitalised(label)}
      effect={{ multiplier: "as base", note: "same weeks" }}
      detail={
        <>
          {format.weekDays(week, { year: false })} · {format.multiplier(multiplier)} of a usual week
        </>
      }
    />
  );
};
