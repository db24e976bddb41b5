import type { PlanCell, Scenario } from "@shared/contract/scenarios";
import { bandOf } from "@shared/planning";
import { Lanes } from "@/components/charts/driver-lane/lanes";
import type { ScenarioEditing } from "../hooks/use-scenario-edit";
import type { ScenarioFigures } from "../hooks/use-prediction";
import { changeAll } from "../view/plan-changes";
import type { PlanField } from "../view/plan-changes";
import { LevelLane } from "./level-lane";
import { PriceLane } from "./price-lane";
import { TemperatureLane } from "./temperature-lane";
import { WeekLane } from "./week-lane";

/** What every lane of the bench needs. */
export type BenchProps = {
  scenario: Scenario;
  figures: ScenarioFigures;
  level: number;
  /** The plan week looked at. */
  week: string;
  onWeek: (week: string) => void;
  readOnly: boolean;
  /** Shows a change while it is being dragged; `set` makes it. */
  preview: <Field extends PlanField>(field: Field, value: PlanCell[Field] | undefined) => void;
  set: <Field extends PlanField>(field: Field, value: PlanCell[Field] | undefined) => void;
};

type BenchLanesProps = Omit<BenchProps, "preview" | "set" | "readOnly"> & { editing: ScenarioEditing };

/** The drivers one under another, each a slider on its own curve; what a lane sets holds for all stores and weeks. */
export const BenchLanes = ({ editing, ...shared }: BenchLanesProps) => {
  const { scenario, figures } = shared;
  const places = figures.cells;
  const { cells } = editing.edit;
  const props: BenchProps = {
    ...shared,
    readOnly: !scenario.may.edit,
    preview: (field, value) => editing.preview(changeAll(cells, { places, field, value })),
    set: (field, value) => editing.change({ cells: changeAll(cells, { places, field, value }) }),
  };
  return (
    <Lanes label="Drivers" level={shared.level} band={bandOf(figures.laneStores.map(({ model }) => model))}>
      <PriceLane {...props} />
      <WeekLane {...props} />
      <TemperatureLane {...props} />
      <LevelLane {...props} driver="promotion" field="promotion" levels={promotionLevels} />
      <LevelLane {...props} driver="mechanic" field="mechanic" levels={mechanicLevels} />
    </Lanes>
  );
};

const promotionLevels = [
  { value: "none", label: "None" },
  { value: "feature", label: "Feature" },
  { value: "display", label: "Display" },
  { value: "both", label: "Both" },
] as const;

const mechanicLevels = [
  { value: "none", label: "None" },
  { value: "multi_buy", label: "Multi-buy" },
  { value: "coupon", label: "Coupon" },
  { value: "other", label: "Other" },
] as const;
