import { quoted } from "../basis/columns";
import { EngineError } from "../errors";
import type { BandKind, FittedModel } from "../types";
import { averagedModel } from "./averaged-model";
import { correctedModel } from "./corrected-model";

const kinds: readonly string[] = ["pointwise", "with-mean", "corrected", "averaged"] satisfies BandKind[];

/**
 * The model whose covariance a kind of band is made of; curves, differences and predictions of it have that band.
 * Coefficients stay as they are.
 *
 * @param band default "pointwise".
 * @returns the model itself for bands that take penalties as known. What it returns is for the band "pointwise" (or
 * "with-mean", where it was made for "corrected"): its error is in it already, and would be added twice.
 * @throws EngineError option-invalid for other words.
 * Cost: nothing, or that of `correctedModel` or `averagedModel`: once for many curves of one model.
 * @example const honest = bandModel(model, "averaged"); termCurve(honest, "price"); covarianceQuadratic(honest, gradient, gradient);
 */
export function bandModel(model: FittedModel, band: BandKind = "pointwise"): FittedModel {
  if (!kinds.includes(band)) throw new EngineError("option-invalid", `band is ${JSON.stringify(band)}; it must be one of ${quoted(kinds)}.`);
  if (band === "corrected") return correctedModel(model);
  return band === "averaged" ? averagedModel(model) : model;
}

/** Whether a kind of band has the error of the curve's level in it. */
export const hasMean = (band: BandKind = "pointwise"): boolean => band === "with-mean" || band === "corrected";
