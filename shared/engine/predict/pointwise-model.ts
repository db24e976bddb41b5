import { withCentredLevels } from "../inference/level-centring";
import { posteriorOf } from "../inference/posterior";
import type { FittedModel } from "../types";
import { coefficientMatrix } from "./shared-coefficients";

/**
 * The model with the covariance it was fitted with, which takes penalties as known: from its information, where the error
 * of penalties was added since.
 *
 * @returns the model itself where nothing was added; else one that agrees with the fitted one to rounding.
 * Cost: nothing, or O(size^3 + coefficients x coordinates^2 of the widest term).
 * @example pointwiseModel(bandModel(model, "averaged")).covariance; // as model.covariance, to 1e-8 of the largest entry
 */
export function pointwiseModel(model: FittedModel): FittedModel {
  const { band, information, dispersion } = model;
  if (band === "pointwise" || information === null) return model;
  const posterior = posteriorOf(model, withCentredLevels(model, information));
  if (posterior === null) return model;
  const covariance = coefficientMatrix(model, posterior.covariance.map((value) => value * dispersion));
  return { ...model, band: "pointwise", covariance };
}
