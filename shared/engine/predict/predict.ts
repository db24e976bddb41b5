import { outsideRows } from "../basis/term-basis";
import { EngineError } from "../errors";
import { familyRules } from "../family/family";
import type { FamilyRules, Interval, RowUncertainty } from "../family/family-rules";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { Family, FittedModel, ModelData, PredictOptions, Prediction } from "../types";
import { designRows, rowStandardErrors } from "./design-rows";
import { extendModel } from "./extend-model";
import { normalQuantile } from "./level";

const defaultLevel = 0.95;

/**
 * Predicts rows: expected value with an interval, and the parts of the linear predictor. Curves go on as straight lines
 * beyond the range they were fitted to, flagged in `outside`; nothing is clamped or capped. Weeks beyond a slowly moving
 * level's last and groups never seen are predicted as `extendModel` says.
 * Interval "mean": of the expected value, coefficients' uncertainty only. "observation": of a new row's value, noise and
 * coefficients' uncertainty together (quasi-poisson: negative binomial of size mu / (dispersion - 1), Poisson where the
 * dispersion is 1 or less, gamma for fractional units; negative-binomial: of size theta; log-gaussian: lognormal; binomial: none).
 *
 * @param data the columns of the terms and the offset, n rows; the response is not needed.
 * @returns arrays of length n; contributions per term id, "intercept" and "offset" sum to `linearPredictor`.
 * @throws EngineError as `designRows`; option-invalid.
 * @example predict(model, { price: [1.49], promotion: ["feature"] }, { level: 0.8 }).mean[0];
 */
export function predict(fitted: FittedModel, data: ModelData, options: PredictOptions = {}): Prediction {
  const model = extendModel(fitted, data);
  const level = options.level ?? defaultLevel;
  const quantile = normalQuantile(level);
  const family = familyRules(model.spec.family);
  const intervalOf = intervalRule(family, model.spec.family, options.interval ?? "mean");
  const rows = designRows(model, data);
  const contributions: Record<string, Float64Array> = {};
  const linearPredictor = rows.offset.slice();
  for (const part of rows.parts) {
    const own = new Float64Array(rows.count);
    addRowsTimes(part.rows, model.coefficients, part.first, own);
    contributions[part.id] = own;
    for (let row = 0; row < rows.count; row++) linearPredictor[row] += own[row];
  }
  contributions.offset = rows.offset.slice();
  const standardError = rowStandardErrors(model, rows.parts, rows.count);
  const { dispersion } = model;
  const common = { dispersion, theta: model.theta ?? 1, level, quantile, fractional: model.fractionalResponse };
  const lower = new Float64Array(rows.count);
  const upper = new Float64Array(rows.count);
  for (let row = 0; row < rows.count; row++) {
    const interval = intervalOf({ ...common, linearPredictor: linearPredictor[row], standardError: standardError[row] });
    lower[row] = interval.lower;
    upper[row] = interval.upper;
  }
  return {
    mean: linearPredictor.map((value) => family.mean(value, dispersion)),
    median: family.median === null ? null : linearPredictor.map(family.median),
    lower, upper, linearPredictor, standardError, contributions,
    outside: Object.fromEntries(fitted.terms.map((term) => [term.id, outsideRows(term, data)])),
  };
}

function intervalRule(rules: FamilyRules, family: Family, interval: string): (row: RowUncertainty) => Interval {
  if (interval === "mean") return rules.meanInterval;
  if (interval !== "observation") {
    throw new EngineError("option-invalid", `interval is ${JSON.stringify(interval)}; it must be "mean" or "observation".`);
  }
  if (rules.observationInterval !== null) return rules.observationInterval;
  throw new EngineError("option-invalid", `interval is "observation"; for ${family} only the interval of the mean exists ("mean").`);
}
