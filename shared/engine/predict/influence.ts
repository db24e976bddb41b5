import { numberColumn } from "../basis/columns";
import { EngineError } from "../errors";
import { familyRules } from "../family/family";
import { isPerfectFit } from "../inference/perfect-fit";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { FittedModel, ModelData } from "../types";
import { designRows, rowStandardErrors } from "./design-rows";
import type { DesignRows } from "./design-rows";
import { pointwiseModel } from "./pointwise-model";
import { residuals } from "./residuals";

/** One value per row of the data. */
export type Influence = {
  /** Diagonal of the matrix that turns (working) responses into fitted values, 0 to 1; they sum to the model's edf. */
  leverage: Float64Array;
  /** Pearson residual over its own standard error, sqrt(dispersion (1 - leverage)). */
  standardisedResidual: Float64Array;
  /** How far the fit would move without the row, in its own uncertainty, per degree of freedom. */
  cooksDistance: Float64Array;
};

/** A row that the fit follows exactly has no residual to speak of; what is divided by stays above this. */
const leastFreedom = 1e-10;

/**
 * What each row does to the fit: leverage h_i = w_i x_i' C x_i, C = (X'WX + S)^-1 (whatever band the model's covariance is
 * of) with the working weights w of the last working model, standardised residual r_i = (Pearson residual) /
 * sqrt(dispersion (1 - h_i)), Cook's distance r_i^2 h_i / ((1 - h_i) edf). Exact for a normal response at its penalties,
 * first order at convergence for others. Rows of weight 0 pull at nothing: leverage and distance 0.
 * Sources: Cook (1977), Technometrics 19, 15-18; McCullagh & Nelder (1989), sections 12.5 to 12.7.
 *
 * @param data the rows fitted to, with the columns of the response, the terms, offset and weights. Not changed.
 * @throws EngineError as `predict`; length-mismatch for other numbers of rows; option-invalid where the fit is perfect,
 * and with local regression.
 * Cost: that of predicting the rows with their standard errors.
 * @example influence(model, data).cooksDistance.findIndex((distance) => distance > 1); // a row to look at
 */
export function influence(model: FittedModel, data: ModelData): Influence {
  if (isPerfectFit(model)) {
    throw new EngineError("option-invalid", "The model reproduces the response exactly; no row's influence can be told.");
  }
  if (model.information === null) {
    throw new EngineError("option-invalid", "A model with local regression has no working model whose rows' influence could be told.");
  }
  const pearson = residuals(model, data, { kind: "pearson" });
  if (pearson.length !== model.fitted.length) {
    throw new EngineError(
      "length-mismatch",
      `The data have ${pearson.length} rows, the model was fitted to ${model.fitted.length}; influence is of the rows fitted to.`,
    );
  }
  const design = designRows(model, data);
  const weights = workingWeights(model, data, design);
  const { dispersion, edf } = model;
  const leverage = rowStandardErrors(pointwiseModel(model), design.parts, design.count).map((error, row) => Math.min(1, (weights[row] * error * error) / dispersion));
  const standardisedResidual = pearson.map((value, row) => value / Math.sqrt(dispersion * Math.max(1 - leverage[row], leastFreedom)));
  const cooksDistance = standardisedResidual.map((value, row) => (value * value * leverage[row]) / (Math.max(1 - leverage[row], leastFreedom) * edf));
  return { leverage, standardisedResidual, cooksDistance };
}

/** Expected information of each row about its linear predictor, over the dispersion: the prior weights for a normal response. */
function workingWeights(model: FittedModel, data: ModelData, design: DesignRows): Float64Array {
  const { spec, fitted } = model;
  const weights = spec.weights === undefined ? new Float64Array(design.count).fill(1) : numberColumn(data, spec.weights, "weights");
  const rules = familyRules(spec.family);
  if (rules.fitting === "exact") return weights;
  const linearPredictor = design.offset.slice();
  for (const part of design.parts) addRowsTimes(part.rows, model.coefficients, part.first, linearPredictor);
  const workingWeights = new Float64Array(design.count);
  rules.working({
    response: numberColumn(data, spec.response, "response"), offset: design.offset, weights, linearPredictor, mean: fitted, theta: model.theta ?? 1,
    workingResponse: new Float64Array(design.count), workingWeights,
  });
  return workingWeights.map((weight, row) => (weights[row] > 0 ? weight : 0));
}
