import type { ExactRules } from "./family-rules";
import { standardised } from "./standardised";
import { normalLogLikelihood } from "./normal-log-likelihood";

/** Normal response, identity link. */
export const gaussian: ExactRules = {
  fitting: "exact",
  scale: "unknown",
  check: () => undefined,
  checkValues: () => undefined,
  transform: (response) => response.slice(),
  mean: (linearPredictor) => linearPredictor,
  median: (linearPredictor) => linearPredictor,
  logLikelihood: ({ response, linearPredictor, weights }) => normalLogLikelihood({ values: response, around: linearPredictor, weights }),
  meanInterval({ linearPredictor, standardError, quantile }) {
    const half = quantile * standardError;
    return { lower: linearPredictor - half, upper: linearPredictor + half };
  },
  observationInterval({ linearPredictor, standardError, quantile, dispersion }) {
    const half = quantile * Math.hypot(standardError, Math.sqrt(dispersion));
    return { lower: linearPredictor - half, upper: linearPredictor + half };
  },
  quantileResidual: ({ response, linearPredictor, weight, dispersion }) => standardised(response - linearPredictor, dispersion / weight),
};
