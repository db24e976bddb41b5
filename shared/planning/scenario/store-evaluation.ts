import type { FittedModel } from "../../engine";
import type { Driver } from "../driver";
import { rememberingPredictor } from "./cell-predictions";
import type { CellPredictions } from "./cell-predictions";
import { splitAmongDrivers } from "./driver-split";
import type { DriverUnits } from "./driver-split";
import { limitsOf } from "./limits";
import { cellInState } from "./plan-cells";
import type { PlanCell, StoreModel } from "./scenario";

/** One store's plan in its three states, and what its drivers add. */
export type StoreEvaluation = {
  store: string;
  model: FittedModel;
  plan: CellPredictions;
  base: CellPredictions;
  normal: CellPredictions;
  drivers: Map<Driver, DriverUnits>;
};

/**
 * Prepares one store: its base, normal weather and plan are predicted only when their cells change, and the split only when
 * plan or base does.
 *
 * @returns a function from the store's cells to their evaluation.
 * @example const evaluate = storeEvaluator({ store: "S1", model }); evaluate(cells).plan.total
 */
export function storeEvaluator({ store, model }: StoreModel): (cells: readonly PlanCell[]) => StoreEvaluation {
  const limits = limitsOf(model);
  const predictPlan = rememberingPredictor({ model, limits, state: "plan" });
  const predictBase = rememberingPredictor({ model, limits, state: "base" });
  const predictNormal = rememberingPredictor({ model, limits, state: "normal" });
  let last: StoreEvaluation | null = null;
  return (cells) => {
    const plan = predictPlan(cells.map((cell) => cellInState(cell, "plan")));
    const base = predictBase(cells.map((cell) => cellInState(cell, "base")));
    const normal = predictNormal(cells.map((cell) => cellInState(cell, "normal")));
    if (last === null || last.plan !== plan || last.base !== base || last.normal !== normal) {
      last = { store, model, plan, base, normal, drivers: splitAmongDrivers({ model, plan, base }) };
    }
    return last;
  };
}
