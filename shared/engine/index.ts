export type * from "./types";
export { EngineError } from "./errors";
export type { EngineErrorCode } from "./errors";
export { fitModel } from "./fit/fit-model";
export { modelReport } from "./inference/model-report";
export {
  covarianceQuadratic, designRows, designTransposeTimes, designTransposeTimesMany, transposeTimes,
} from "./predict/design-rows";
export type { DesignRows } from "./predict/design-rows";
export { normalQuantile } from "./predict/level";
export { predict } from "./predict/predict";
export { supportCounts } from "./predict/support";
export { termCurve } from "./predict/term-curve";
export { parseModel, serialiseModel } from "./model-text";
