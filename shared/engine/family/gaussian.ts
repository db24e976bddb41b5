import type { ExactRules } from "./family-rules";

/** Normal response, identity link. */
export const gaussian: ExactRules = {
  fitting: "exact",
  check: () => undefined,
  transform: (response) => response.slice(),
  mean: (linearPredictor) => linearPredictor,
  median: (linearPredictor) => linearPredictor,
  meanInterval({ linearPredictor, standardError, quantile }) {
    const half = quantile * standardError;
    return { lower: linearPredictor - half, upper: linearPredictor + half };
  },
  observationInterval({ linearPredictor, standardError, quantile, dispersion }) {
    const half = quantile * Math.hypot(standardError, Math.sqrt(dispersion));
    return { lower: linearPredictor - half, upper: linearPredictor + half };
  },
};
