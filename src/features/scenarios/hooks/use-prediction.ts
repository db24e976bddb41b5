import { useMemo } from "react";
import type { PlanCell as PlanChange } from "@shared/contract/scenarios";
import { planInput, prepareScenario, readFit } from "@shared/planning";
import type { LaneStore, LeftOutCells, PlanCell, ScenarioPrediction } from "@shared/planning";
import type { PlanningContext } from "../api/planning-context";

export type ScenarioFigures = {
  prediction: ScenarioPrediction;
  /** The plan's store-weeks with the changes on them. */
  cells: PlanCell[];
  /** The same without any change: where sliders stand at first. */
  baseCells: PlanCell[];
  /** Selected stores weighed by the base units that do not move while dragging, so that curves stand still. */
  laneStores: LaneStore[];
  leftOut: LeftOutCells[];
};

type Asked = { context: PlanningContext; changes: readonly PlanChange[]; fixedCost: number; level: number };

/**
 * Predicts the plan in the browser by the code the server runs. Null where no store-week can be predicted. Only what
 * a drag changes is computed again.
 */
export function usePrediction({ context, changes, fixedCost, level }: Asked): ScenarioFigures | null {
  const models = useMemo(() => new Map(context.fits.map(({ store, fit }) => [store, readFit(fit)])), [context]);
  const still = useMemo(() => {
    const base = planInput({ base: context.base, changes: [], models });
    if (base.cells.length === 0) return null;
    const prepared = prepareScenario(base.stores);
    const unitsOf = new Map(prepared.evaluate({ cells: base.cells, level: 0.8 }).stores.map((row) => [row.store, row.baseUnits]));
    const laneStores = base.stores.map((store) => ({ ...store, baseUnits: unitsOf.get(store.store) ?? 0 }));
    return { prepared, baseCells: base.cells, laneStores };
  }, [context, models]);
  return useMemo(() => {
    if (!still) return null;
    const { cells, leftOut } = planInput({ base: context.base, changes, models });
    const prediction = still.prepared.evaluate({ cells, level, costs: { fixedCost } });
    return { prediction, cells, baseCells: still.baseCells, laneStores: still.laneStores, leftOut };
  }, [still, context, changes, models, level, fixedCost]);
}
