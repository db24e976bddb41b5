import { useMemo } from "react";
import { WeekBars } from "@/components/charts/week-bars/week-bars";
import { Sheet } from "@/components/ui/sheet";
import { useChainFormat } from "@/lib/format/chain-format";
import type { PlanningContext } from "../api/planning-context";
import type { ScenarioFigures } from "../hooks/use-prediction";
import { pastWeeks } from "../view/history-weeks";

type WeekSheetProps = { figures: ScenarioFigures; context: PlanningContext; week: string; onWeek: (week: string) => void };

/** The weeks one by one: what was sold, then what the plan gives over its base. */
export const WeekSheet = ({ figures, context, week, onWeek }: WeekSheetProps) => {
  const format = useChainFormat();
  const { prediction } = figures;
  const [first] = prediction.weeks;
  const past = useMemo(() => pastWeeks(context.history, { before: first?.week, name: format.weekName }), [context, format, first?.week]);
  const plan = prediction.weeks.map((row) => ({
    week: row.week,
    ...format.weekName(row.week),
    units: row.units.estimate,
    lower: row.units.lower,
    upper: row.units.upper,
    base: row.baseUnits,
  }));
  return (
    <Sheet>
      <WeekBars
        title="Week by week, units of all stores in the plan"
        heading="Week by week"
        past={past}
        plan={plan}
        selected={week}
        onSelect={onWeek}
        format={format.units}
      />
    </Sheet>
  );
};
