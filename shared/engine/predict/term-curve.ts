import { basisLogSlopeRows, basisRows, outsideRows } from "../basis/term-basis";
import { quoted } from "../basis/columns";
import { EngineError } from "../errors";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { SparseRows } from "../linalg/sparse-rows";
import type { CurveDerivative, FittedModel, FittedTerm, ModelData, TermCurve, TermCurveOptions } from "../types";
import { rowStandardErrors } from "./design-rows";
import { normalQuantile } from "./level";
import { supportCounts } from "./support";

const defaultLevel = 0.95;
const defaultPoints = 100;
const mostPoints = 100_000;

/**
 * A term's contribution on the link scale over values of its column, with a pointwise band; centred over the fitted rows
 * (a factor: relative to its reference level). A straight line's band is zero at its centre.
 * With `derivative` also d contribution / d ln x: for a log link and a price, the own-price elasticity at x.
 *
 * @param options.points evenly spaced over the observed range (on the log scale for log terms; a circle: over its period);
 * or options.at: values in the column's own unit, level names for a factor.
 * @returns arrays of one length; `supportCount` fitted rows near each x.
 * @throws EngineError term-unknown, option-invalid, and as `predict` for `at`.
 * Cost: O(points x 16).
 * @example termCurve(model, "price", { at: [1.49, 1.99], level: 0.8, derivative: true }).derivative?.estimate;
 */
export function termCurve(model: FittedModel, termId: string, options: TermCurveOptions = {}): TermCurve {
  const term = model.terms.find((candidate) => candidate.id === termId);
  if (term === undefined) {
    throw new EngineError("term-unknown", `The model has no term "${termId}"; it has ${quoted(model.terms.map(({ id }) => id)) || "none"}.`);
  }
  const quantile = normalQuantile(options.level ?? defaultLevel);
  const x = valuesToDraw(term, options);
  const data: ModelData = { [term.columns[0]]: x };
  const band = bandOf(model, term, { rows: basisRows(term.basis, data), count: x.length, quantile });
  const slopes = options.derivative === true ? basisLogSlopeRows(term.basis, data) : null;
  return {
    termId, x, ...band,
    observedRange: term.observedRange,
    supportCount: supportCounts(term, x),
    outside: outsideRows(term, data),
    ...(slopes === null ? {} : { derivative: bandOf(model, term, { rows: slopes, count: x.length, quantile }) }),
  };
}

function bandOf(
  model: FittedModel, term: FittedTerm, at: { rows: SparseRows; count: number; quantile: number },
): CurveDerivative {
  const estimate = new Float64Array(at.count);
  addRowsTimes(at.rows, model.coefficients, term.first, estimate);
  const standardError = rowStandardErrors(model, [{ id: term.id, first: term.first, rows: at.rows }], at.count);
  return {
    estimate,
    standardError,
    lower: estimate.map((value, k) => value - at.quantile * standardError[k]),
    upper: estimate.map((value, k) => value + at.quantile * standardError[k]),
  };
}

function valuesToDraw(term: FittedTerm, options: TermCurveOptions): Float64Array | string[] {
  const { at } = options;
  if (term.basis.kind === "factor") return at === undefined ? [...term.basis.levels] : Array.from(at, String);
  if (at !== undefined) {
    return Float64Array.from(Array.from<number | string>(at), (value) => {
      if (typeof value === "number") return value;
      throw new EngineError("option-invalid", `at holds ${JSON.stringify(value)}; term "${term.id}" needs numbers.`);
    });
  }
  const points = options.points ?? defaultPoints;
  if (!Number.isInteger(points) || points < 2 || points > mostPoints) {
    throw new EngineError("option-invalid", `points is ${points}; it must be a whole number from 2 to ${mostPoints}.`);
  }
  return evenlySpaced(term, points);
}

function evenlySpaced(term: FittedTerm, points: number): Float64Array {
  const { basis } = term;
  const [from, to] = basis.kind === "cyclic-smooth" ? [basis.lower, basis.upper] : (term.observedRange ?? [0, 0]);
  const isLog = "log" in basis && basis.log;
  const start = isLog ? Math.log(from) : from;
  const width = (isLog ? Math.log(to) : to) - start;
  const x = new Float64Array(points);
  for (let k = 0; k < points; k++) {
    const value = start + (width * k) / (points - 1);
    x[k] = isLog ? Math.exp(value) : value;
  }
  x[0] = from;
  x[points - 1] = to;
  return x;
}
