import { designRows, extendModel, predict, rowStandardErrors, transposeTimes } from "../../engine";
import type { DesignRows, FittedModel, ModelData } from "../../engine";
import { modelColumns } from "../model-columns";
import type { ModelCell } from "../model-columns";
import { withKnownPenalties } from "../sum-over-stores";
import { PlanningError } from "../planning-error";
import type { CellFlag, Limits } from "./limits";
import { cellInState, isSameInState, placeOf } from "./plan-cells";
import type { CellState } from "./plan-cells";
import type { PlanCell } from "./scenario";

/** One store's cells in one state, predicted: arrays have one entry per cell. */
export type CellPredictions = {
  /** Expected units. */
  mean: Float64Array;
  /** Of ln(mean), coefficients only. */
  standardError: Float64Array;
  /** The same as if penalties were known; of the plan alone, else empty: only its weeks are summed one by one. */
  knownError: Float64Array;
  /** Per term id: parts of the linear predictor. */
  contributions: Record<string, Float64Array>;
  rows: DesignRows;
  /** Sum of mean. */
  total: number;
  /** Gradient of `total` with respect to the coefficients: the mean's sum of each design column. */
  totalGradient: Float64Array;
  flags: CellFlag[];
};

/**
 * Predicts one store's cells in one state, and keeps the answer while the same cells are asked for again: while one driver of
 * a plan is dragged, its base does not change.
 *
 * @returns a function from a plan's cells to predictions; the identical object as long as no cell changed.
 * @throws (the function) PlanningError "unusable-value" where a model reads a temperature that is not known.
 * @example
 * const predictBase = rememberingPredictor({ model, limits: limitsOf(model), state: "base" });
 * predictBase(cells) === predictBase(cells) // true
 */
export function rememberingPredictor(
  { model, limits, state }: { model: FittedModel; limits: Limits; state: CellState },
): (cells: readonly PlanCell[]) => CellPredictions {
  let lastCells: readonly PlanCell[] = [];
  let last: CellPredictions | null = null;
  return (cells) => {
    const isUnchanged =
      cells.length === lastCells.length && cells.every((cell, index) => isSameInState(cell, lastCells[index], state));
    if (last === null || !isUnchanged) {
      const inState = cells.map((cell) => cellInState(cell, state));
      last = predictCells({ model, limits, cells: inState, state });
      lastCells = cells;
    }
    return last;
  };
}

function predictCells(
  { model, limits, cells, state }: { model: FittedModel; limits: Limits; cells: readonly ModelCell[]; state: CellState },
): CellPredictions {
  requireTemperatures(model, cells);
  const limited = limits(cells, state);
  const data = modelColumns(limited.cells);
  const { mean, standardError, contributions } = predict(model, data);
  const rows = designRows(model, data);
  const knownError = state === "plan" ? knownErrors(model, data, { rows, standardError }) : new Float64Array(0);
  const total = mean.reduce((sum, value) => sum + value, 0);
  return {
    mean, standardError, knownError, contributions, rows, total, totalGradient: transposeTimes(model, rows, mean), flags: limited.flags,
  };
}

function knownErrors(
  model: FittedModel, data: ModelData, { rows, standardError }: Pick<CellPredictions, "rows" | "standardError">,
): Float64Array {
  const known = withKnownPenalties(model);
  if (known === model) return standardError;
  // Weeks that a slowly moving level has not reached are coefficients of their own, as `predict` has them.
  const extended = extendModel(known, data);
  const { parts } = extended === known ? rows : designRows(extended, data);
  return rowStandardErrors(extended, parts, rows.count);
}

function requireTemperatures(model: FittedModel, cells: readonly ModelCell[]): void {
  if (!model.terms.some((term) => term.columns.includes("temperatureC"))) return;
  const missing = cells.find((cell) => cell.temperatureC === null);
  if (missing !== undefined) {
    throw new PlanningError("unusable-value", `${placeOf(missing)}: its model reads a temperature, and none is known.`);
  }
}
