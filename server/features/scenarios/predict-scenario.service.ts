import type { EntityManager } from "@mikro-orm/postgresql";
import { EngineError } from "@shared/engine";
import {
  planInput,
  PlanningError,
  predictScenario,
  readFit,
  type LeftOutCells,
  type ScenarioPrediction,
} from "@shared/planning";
import { unusable } from "../../errors";
import { requireModel, requireStores } from "../drivers";
import { planBase } from "./context/planning-context.service";
import { cellsOf } from "./scenarios.repository";
import { readScenario } from "./scenarios.service";

/** A saved plan's figures, and the store-weeks that could not be predicted. */
export type SavedPrediction = { prediction: ScenarioPrediction; leftOut: LeftOutCells[] };

/**
 * Predicts a saved scenario with its model, by the same code and from the same base as the browser.
 *
 * @throws ProblemError 404 where there is no such scenario, 422 where none of its store-weeks can be predicted.
 */
export async function predictSavedScenario(
  em: EntityManager,
  { id, level }: { id: string; level: number },
): Promise<SavedPrediction> {
  const scenario = await readScenario(em, id);
  const stores = await requireStores(em, scenario.stores);
  const model = await requireModel(em, scenario.model.id);
  const weeks = { first: scenario.firstWeek, last: scenario.lastWeek };
  const { base, fits, notes } = await planBase(em, { productId: scenario.product.id, stores, weeks, model });
  const models = new Map(fits.map(({ store, fit }) => [store, readFit(fit)]));
  const { leftOut, ...input } = planInput({ base, changes: cellsOf(scenario), models });
  if (input.cells.length === 0)
    throw unusable("nothing-to-predict", `No store-week of this plan can be predicted. ${notes.join(" ")}`);
  try {
    return { prediction: predictScenario({ ...input, level, costs: { fixedCost: scenario.fixedCost } }), leftOut };
  } catch (error) {
    if (error instanceof PlanningError || error instanceof EngineError) throw unusable(error.code, error.message);
    throw error;
  }
}
