import { quoted } from "../basis/columns";
import { EngineError } from "../errors";
import type { BandKind, FittedModel } from "../types";
import { averagedModel } from "./averaged-model";
import { correctedModel } from "./corrected-model";
import { isExtended } from "./is-extended";
import { pointwiseModel } from "./pointwise-model";

const kinds: readonly string[] = ["pointwise", "with-mean", "corrected", "averaged"] satisfies BandKind[];

/**
 * The model whose covariance a kind of band is made of; curves, differences and predictions of it have that band.
 * Coefficients stay as they are, and so does all that tests and criteria are made of: `modelReport` is the same.
 *
 * @param band default: the model's own.
 * @returns the model itself where its covariance is of that kind already, so that nothing is ever added twice; `band` of
 * the model says which it is. A model without chosen penalties to average over (see `averagedModel`) stays as it is.
 * @throws EngineError option-invalid for other words; and for another band than the model's own once it has been carried on to
 * new weeks or groups (`extendModel`), of which what the fit remembers knows nothing.
 * Cost: nothing, or that of `correctedModel`, `averagedModel` or `pointwiseModel`: once for many curves of one model.
 * @example const honest = bandModel(model, "averaged"); termCurve(honest, "price"); covarianceQuadratic(honest, gradient, gradient);
 */
export function bandModel(model: FittedModel, band: BandKind = model.band): FittedModel {
  if (!kinds.includes(band)) throw new EngineError("option-invalid", `band is ${JSON.stringify(band)}; it must be one of ${quoted(kinds)}.`);
  // The level's error is added where a curve is drawn, to the covariance as fitted.
  const wanted = band === "with-mean" ? "pointwise" : band;
  if (model.band !== wanted && isExtended(model)) {
    throw new EngineError(
      "option-invalid",
      `band is "${band}", the model's is "${model.band}", and it has been carried on to new weeks or groups; ask for its band before that.`,
    );
  }
  if (wanted === "averaged") return averagedModel(model);
  return wanted === "corrected" ? correctedModel(model) : pointwiseModel(model);
}

/** Whether a kind of band has the error of the curve's level in it. */
export const hasMean = (band?: BandKind): boolean => band === "with-mean" || band === "corrected";
