import type { Curve } from "@shared/contract/drivers";
import { yearFraction } from "@shared/calendar";
import type { WeekStart } from "@shared/calendar";
import { monthTicks } from "@/components/charts/scale/month-ticks";
import { useChain } from "@/lib/chain";
import { useChainFormat } from "@/lib/format/chain-format";
import { weekAtFraction } from "../view/week-at-fraction";
import { NumberLane } from "./number-lane";

const wholeYear = { min: 0, max: 1, step: 7 / 365 };
const ticks = monthTicks(1);

type SeasonLaneProps = { curve: Curve & { x: number[] }; level: number; newestWeek: string };

/** The time of year, in weeks of the year last recorded. */
export const SeasonLane = ({ curve, level, newestWeek }: SeasonLaneProps) => {
  const format = useChainFormat();
  const weekStart = (useChain()?.weekStart ?? 1) as WeekStart;
  const year = Number(newestWeek.slice(0, 4));
  const weekAt = (fraction: number) => weekAtFraction(fraction, year, weekStart);
  return (
    <NumberLane
      curve={curve}
      level={level}
      label="Week of year"
      title="Demand by week of year, in times an average week"
      steps={wholeYear}
      start={yearFraction(newestWeek)}
      baseline={null}
      ticks={ticks}
      format={(fraction) => `Week ${format.weekNumber(weekAt(fraction))}`}
      detail={(fraction) => format.weekDays(weekAt(fraction), { year: false })}
    />
  );
};
