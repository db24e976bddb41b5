import { normalQuantile } from "../../engine";
import { PlanningError } from "../planning-error";
import { groupByStore } from "./plan-cells";
import type { ScenarioPlan, ScenarioPrediction, StoreModel } from "./scenario";
import { flagsOf } from "./scenario-flags";
import { liftOf, splitOf, totalsOf, weatherOf } from "./scenario-lift";
import { moneyOf } from "./scenario-money";
import { unitsOf, weeksOf } from "./scenario-units";
import type { EvaluatedStore } from "./scenario-units";
import { storeEvaluator } from "./store-evaluation";

/** A scenario ready to be evaluated again and again: it remembers what did not change since the last time. */
export type PreparedScenario = { evaluate: (plan: ScenarioPlan) => ScenarioPrediction };

/**
 * Prepares scenarios for some stores and their models. `evaluate` predicts each store-week under the plan, at base (same week,
 * weather and event at regular price without promotion) and at base in normal weather, and tells units, lift, the split among
 * drivers, weeks, stores, money and what to distrust. Pages keep it while a person drags: only stores and states whose
 * cells changed are predicted anew. Cost per changed store-week: a prediction and a few products with the coefficients' covariance.
 *
 * @param stores one model per store, with a log link (quasi-Poisson or log-gaussian).
 * @throws PlanningError "no-log-link", "not-in-plan" (a store given twice); `evaluate` throws what `groupByStore` and the engine's
 * `predict` throw, and PlanningError "unusable-value" for a level outside 0 to 1 or a temperature that is needed and not known.
 * @example const scenario = prepareScenario([{ store: "S1", model }]);
 * scenario.evaluate({ cells, level: 0.8 }).lift // { estimate: 0.42, lower: 0.31, upper: 0.55 }
 */
export function prepareScenario(stores: readonly StoreModel[]): PreparedScenario {
  stores.forEach(requireLogLink);
  const codes = stores.map(({ store }) => store);
  if (new Set(codes).size < codes.length) throw new PlanningError("not-in-plan", "Each store of a scenario has one model.");
  const evaluators = new Map(stores.map((store) => [store.store, storeEvaluator(store)]));
  return {
    evaluate: (plan) => {
      const evaluated: EvaluatedStore[] = [];
      const groups = groupByStore(plan.cells, codes);
      for (const [store, evaluate] of evaluators) {
        const cells = groups.get(store) ?? [];
        if (cells.length > 0) evaluated.push({ ...evaluate(cells), cells });
      }
      return summarise(evaluated, plan);
    },
  };
}

/**
 * Predicts one plan for some stores: `prepareScenario(stores).evaluate(plan)` for when it is asked once.
 *
 * @example predictScenario({ stores: [{ store: "S1", model }], cells, level: 0.8 }).units.estimate
 */
export function predictScenario({ stores, ...plan }: ScenarioPlan & { stores: readonly StoreModel[] }): ScenarioPrediction {
  return prepareScenario(stores).evaluate(plan);
}

function summarise(stores: readonly EvaluatedStore[], { level, costs }: ScenarioPlan): ScenarioPrediction {
  if (!(level > 0 && level < 1)) {
    throw new PlanningError("unusable-value", `An interval's level lies between 0 and 1, not at ${level}.`);
  }
  const z = normalQuantile(level);
  const totals = totalsOf(stores);
  return {
    level,
    units: unitsOf(stores, z),
    baseUnits: totals.base,
    baseInNormalWeather: totals.normal,
    weather: weatherOf(stores, { totals, z }),
    split: splitOf(stores, { totals, z }),
    lift: liftOf(stores, { totals, z }),
    weeks: weeksOf(stores, z),
    stores: stores.map(({ store, plan, base }) => ({ store, units: plan.total, baseUnits: base.total })),
    money: moneyOf(stores, costs),
    flags: flagsOf(stores),
  };
}

function requireLogLink({ store, model }: StoreModel): void {
  if (model.spec.family === "gaussian") {
    const reason = "adds units up instead of multiplying them: it cannot tell a lift";
    throw new PlanningError("no-log-link", `The model of store ${store} ${reason}.`);
  }
}
