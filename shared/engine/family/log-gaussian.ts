import { EngineError } from "../errors";
import { exponential } from "./exponential";
import type { ExactRules } from "./family-rules";
import { standardised } from "./standardised";
import { normalLogLikelihood } from "./normal-log-likelihood";

/**
 * Lognormal response: ln(response) is normal. Median exp(eta), mean exp(eta + dispersion / 2).
 * Source: Johnson, Kotz & Balakrishnan (1994), Continuous Univariate Distributions 1, ch. 14.
 */
export const logGaussian: ExactRules = {
  fitting: "exact",
  scale: "unknown",
  check: checkPositive,
  checkValues: checkPositive,
  transform: (response) => response.map(Math.log),
  mean: (linearPredictor, dispersion) => exponential(linearPredictor + dispersion / 2),
  median: exponential,
  logLikelihood({ response, linearPredictor, weights }) {
    const values = response.map(Math.log);
    // The density of the response is that of its logarithm over the response.
    return normalLogLikelihood({ values, around: linearPredictor, weights }) - values.reduce((sum, value) => sum + value, 0);
  },
  meanInterval({ linearPredictor, standardError, quantile, dispersion }) {
    const middle = linearPredictor + dispersion / 2;
    const half = quantile * standardError;
    return { lower: exponential(middle - half), upper: exponential(middle + half) };
  },
  observationInterval({ linearPredictor, standardError, quantile, dispersion }) {
    const half = quantile * Math.hypot(standardError, Math.sqrt(dispersion));
    return { lower: exponential(linearPredictor - half), upper: exponential(linearPredictor + half) };
  },
  quantileResidual: ({ response, linearPredictor, weight, dispersion }) =>
    standardised(Math.log(response) - linearPredictor, dispersion / weight),
};

function checkPositive(response: Float64Array, column: string): void {
  for (let row = 0; row < response.length; row++) {
    if (!(response[row] > 0)) {
      throw new EngineError(
        "response-invalid",
        `Response "${column}" must be above 0 for log-gaussian; row ${row + 1} is ${response[row]}.`,
      );
    }
  }
}
