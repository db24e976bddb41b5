import { familyRules } from "../family/family";
import type { FittedModel } from "../types";
import { modelDegrees } from "./corrected-degrees";
import { isPerfectFit } from "./perfect-fit";
import type { Posterior } from "./posterior";
import type { TermPlace } from "./term-places";

/** `reason` says why there is none, or what its degrees of freedom leave out. */
export type InformationCriterion = { aic: number | null; degreesOfFreedom: number | null; reason: string | null };

/**
 * Conditional AIC = -2 log-likelihood + 2 (degrees of freedom), the degrees corrected for the choice of penalties, the
 * dispersion and the negative binomial's theta counted where estimated.
 * Source: Wood, Pya & Saefken (2016), J. Am. Statist. Assoc. 111, 1548-1575, section 5.
 *
 * @param fitted the posterior of the model's coordinates; null with local regression or a singular system.
 * @example informationCriterion(model, { posterior, places }).aic;
 */
export function informationCriterion(
  model: FittedModel, fitted: { posterior: Posterior; places: readonly TermPlace[] } | null,
): InformationCriterion {
  const none = (reason: string): InformationCriterion => ({ aic: null, degreesOfFreedom: null, reason });
  if (model.spec.family === "quasi-poisson") return none("quasi families have no likelihood");
  if (model.spec.terms.some(({ kind }) => kind === "local-regression")) return none("local regression has no restricted likelihood to correct by");
  if (fitted === null) return none("the penalised system is singular to rounding");
  if (model.logLikelihood === null || isPerfectFit(model)) return none("the model reproduces the response exactly, and its likelihood has no bound");
  const { corrected, isCorrected } = modelDegrees(fitted.posterior, fitted.places, model.dispersion);
  const scales = (familyRules(model.spec.family).scale === "unknown" ? 1 : 0) + (model.theta === null ? 0 : 1);
  const degreesOfFreedom = corrected + scales;
  return {
    aic: 2 * (degreesOfFreedom - model.logLikelihood),
    degreesOfFreedom,
    reason: reservation(model, isCorrected),
  };
}

/** What the degrees of freedom leave out. */
function reservation({ spec }: FittedModel, isCorrected: boolean): string | null {
  if (!isCorrected) return "with so many coefficients its degrees of freedom are taken at their upper bound";
  const hasShape = spec.terms.some((term) => term.kind === "smooth" && term.shape !== undefined);
  return hasShape ? "a curve of given shape is counted as if it were free to bend" : null;
}
