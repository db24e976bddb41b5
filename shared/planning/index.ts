export { breakEvenOfCell, breakEvenOfPlan } from "./break-even";
export type { BreakEven, BreakEvenCell } from "./break-even";
export { defaultSpec } from "./default-spec";
export type { DefaultSpec, DriverNote } from "./default-spec";
export { driverOfColumn, driverOfTerm } from "./driver";
export type { Driver } from "./driver";
export { logarithmicMean, logarithmicMeanSlopes } from "./logarithmic-mean";
export { bias, coverage, meanAbsoluteScaledError, weightedAbsolutePercentageError } from "./measures";
export type { ActualAndPredicted } from "./measures";
export { commonestPrice, modelledPrice } from "./modelled-price";
export type { ModelledPrice, PriceEvidence } from "./modelled-price";
export { modelColumns } from "./model-columns";
export type { ModelCell } from "./model-columns";
export { extraCost, netGain, netOfTax, planMargins, roundToCents } from "./money";
export type { MoneyCell, PlanCosts, PlanMargins } from "./money";
export { PlanningError } from "./planning-error";
export type { PlanningErrorCode } from "./planning-error";
export { priceLearning } from "./price-learning";
export type { PriceLearning } from "./price-learning";
export { NO_EVENT, promotionOf } from "./sales-row";
export type { FileMechanic, Mechanic, PriceSource, Promotion, SalesRow } from "./sales-row";
export { bandOf, readFit, SHOWN_BAND, shownModel } from "./shown-model";
export type { ShownBand } from "./shown-model";
export { sharedValue } from "./shared-value";
export type { SharedValue } from "./shared-value";
export { curveWithKnown, varianceOfSum } from "./sum-over-stores";
export type { PartVariance } from "./sum-over-stores";
export { exposureOf, toModelData } from "./to-model-data";
export type { RowCounts, SalesModelData } from "./to-model-data";
export { describeVariation } from "./variation";
export type { LevelCounts, Variation } from "./variation";
export { predictScenario, prepareScenario } from "./scenario/prepare-scenario";
export type { PreparedScenario } from "./scenario/prepare-scenario";
export type {
  Interval,
  PlanCell,
  ScenarioFlag,
  ScenarioFlagCode,
  ScenarioMoney,
  ScenarioPlan,
  ScenarioPrediction,
  SplitRow,
  StoreModel,
  StorePrediction,
  WeekPrediction,
} from "./scenario/scenario";
export { elasticityAt } from "./lane/elasticity";
export { laneCurve } from "./lane/lane-curve";
export type { LaneCurve, LaneCurveRequest } from "./lane/lane-curve";
export type { LaneStore } from "./lane/lane-term";
export { planInput } from "./plan-input";
export type { BaseCell, LeftOutCells, PlanChange, PlanInput } from "./plan-input";
