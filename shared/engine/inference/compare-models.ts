import { EngineError } from "../errors";
import type { FittedModel, ModelComparison } from "../types";
import { comparisonVerdict } from "./comparison-verdict";
import { informationCriterion } from "./information-criterion";
import { withCentredLevels } from "./level-centring";
import { nestingFault } from "./nesting";
import { rankDegrees } from "./penalty-share";
import { isPerfectFit } from "./perfect-fit";
import { posteriorOf } from "./posterior";
import { termPlaces } from "./term-places";
import { residualDegrees } from "./term-tests";
import { simpleTail } from "./truncated-test";

/** Below this difference a ratio of deviances says nothing: what little freedom there is was chosen by the same data. */
const leastDegrees = 0.5;

/**
 * Whether what a larger model has more than a smaller one is worth it: F = (difference of deviances / difference of degrees
 * of freedom) / dispersion of the larger where that is estimated, else the difference of deviances (negative binomial: of
 * -2 log-likelihoods, each at its own theta) as a chi-square. Degrees of freedom are 2 tr(F) - tr(FF).
 * Source: Hastie & Tibshirani (1990), sections 3.9 and 6.8; approximate where the models have penalties.
 *
 * @param smaller a special case of `larger`, fitted to the same rows; neither is changed.
 * @throws EngineError option-invalid where it is none, as far as specifications and rows remembered tell: it says why.
 * Cost: that of two model reports without tests.
 * @example compareModels(fitModel(line, data), fitModel(curve, data)).verdict;
 */
export function compareModels(smaller: FittedModel, larger: FittedModel): ModelComparison {
  const fault = nestingFault(smaller, larger);
  if (fault !== null) throw new EngineError("option-invalid", `These models cannot be compared: ${fault}.`);
  const small = measured(smaller);
  const large = measured(larger);
  const hasBoth = small.rank !== null && large.rank !== null;
  const degreesOfFreedom = hasBoth ? (large.rank ?? 0) - (small.rank ?? 0) : larger.edf - smaller.edf;
  const residual = residualDegrees(larger);
  const isPerfect = isPerfectFit(larger);
  const isJudged = degreesOfFreedom >= leastDegrees && !isPerfect;
  const gain = likelihoodGain(smaller, larger);
  const form = gain / (residual === null ? 1 : larger.dispersion);
  const pValue = isJudged ? simpleTail(Math.max(0, form), degreesOfFreedom, residual) : null;
  const aicDifference = small.aic === null || large.aic === null ? null : large.aic - small.aic;
  return {
    statistic: isJudged ? form / (residual === null ? 1 : degreesOfFreedom) : null,
    distribution: residual === null ? "chi-square" : "F",
    degreesOfFreedom,
    residualDegreesOfFreedom: residual,
    pValue,
    aicDifference,
    verdict: comparisonVerdict(smaller, larger, { pValue, degreesOfFreedom, isPerfect }),
  };
}

/** By how much the deviance falls. With theta estimated deviances are of two families, and likelihoods take their place. */
function likelihoodGain(smaller: FittedModel, larger: FittedModel): number {
  if (smaller.theta !== null && smaller.logLikelihood !== null && larger.logLikelihood !== null) {
    return 2 * (larger.logLikelihood - smaller.logLikelihood);
  }
  return smaller.deviance - larger.deviance;
}

/** AIC and 2 tr(F) - tr(FF), each null where the model has none. */
function measured(model: FittedModel): { aic: number | null; rank: number | null } {
  const information = model.information === null ? null : withCentredLevels(model, model.information);
  const posterior = information === null ? null : posteriorOf(model, information);
  if (information === null || posterior === null) return { aic: informationCriterion(model, null).aic, rank: null };
  const { shared, grouped } = rankDegrees(posterior);
  return {
    aic: informationCriterion(model, { posterior, places: termPlaces(model, information) }).aic,
    rank: [...shared, ...grouped].reduce((sum, value) => sum + value, 0),
  };
}
