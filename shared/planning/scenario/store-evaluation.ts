import type { FittedModel } from "../../engine";
import { driverOfTerm } from "../driver";
import type { Driver } from "../driver";
import { rememberingPredictor } from "./cell-predictions";
import type { CellPredictions } from "./cell-predictions";
import { splitAmongDrivers } from "./driver-split";
import type { DriverUnits } from "./driver-split";
import { limitsOf } from "./limits";
import type { PlanCell, StoreModel } from "./scenario";

/** One store's plan in its three states, and what its drivers add. */
export type StoreEvaluation = {
  store: string;
  model: FittedModel;
  plan: CellPredictions;
  base: CellPredictions;
  normal: CellPredictions;
  /** What the drivers that differ between base and plan add. */
  drivers: Map<Driver, DriverUnits>;
  /** Drivers the store's model has, alone or in an interaction. */
  modelled: ReadonlySet<Driver>;
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
  const modelled = new Set(model.terms.flatMap((term) => driverOfTerm(term).split(":")));
  let last: StoreEvaluation | null = null;
  return (cells) => {
    const plan = predictPlan(cells);
    const base = predictBase(cells);
    const normal = predictNormal(cells);
    if (last === null || last.plan !== plan || last.base !== base || last.normal !== normal) {
      last = { store, model, plan, base, normal, drivers: splitAmongDrivers({ model, plan, base }), modelled };
    }
    return last;
  };
}
