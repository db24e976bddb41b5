import { basisLogSlopeRows, basisRows, outsideRows } from "../basis/term-basis";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { SparseRows } from "../linalg/sparse-rows";
import type { CurveDerivative, FittedModel, TermCurve, TermCurveOptions } from "../types";
import { hasMean } from "./band-model";
import { curvePoints } from "./curve-points";
import { rowStandardErrors } from "./design-rows";
import type { DesignRows } from "./design-rows";
import { drawnCurve } from "./drawn-curve";
import { findTerm } from "./find-term";
import { normalQuantile } from "./level";
import { levelParts } from "./level-parts";
import { supportCounts } from "./support";

const defaultLevel = 0.95;

/**
 * A term's contribution on the link scale over values of its column, with a pointwise band; centred over the fitted rows
 * (a factor: relative to its reference level). A straight line's band is zero at its centre. A smooth times a column of
 * numbers and a slope per group are drawn per unit of that column; a group's curve is its deviation alone; a random effect
 * is drawn over its groups, a random walk over its weeks (later ones with the growing band of an unknown week).
 * `band` says what the band allows for (see `BandKind`).
 * With `derivative` also d contribution / d ln x: for a log link and a price, the own-price elasticity at x.
 *
 * @param options.points evenly spaced over the observed range (on the log scale for log terms; a circle: over its period);
 * or options.at: values in the column's own unit, names for a factor or random effect. options.group: which of a term's
 * curves.
 * @returns arrays of one length; `supportCount` fitted rows near each x.
 * @throws EngineError term-unknown, option-invalid, level-unknown, and as `predict` for `at`.
 * Cost: O(points x 16); bands other than the model's own first that of `bandModel`.
 * @example termCurve(model, "price", { at: [1.49, 1.99], level: 0.8, derivative: true }).derivative?.estimate;
 */
export function termCurve(model: FittedModel, termId: string, options: TermCurveOptions = {}): TermCurve {
  const term = findTerm(model, termId);
  const quantile = normalQuantile(options.level ?? defaultLevel);
  const x = curvePoints(term, options);
  const drawn = drawnCurve(model, term, { x, group: options.group, band: options.band });
  const { basis, data } = drawn;
  const bandOf = (rows: SparseRows, beside: DesignRows["parts"]) =>
    bandOver(drawn.model, { rows, first: drawn.term.first, count: x.length, quantile, beside });
  const level = hasMean(options.band) ? levelParts(drawn.model, drawn.term, { count: x.length, group: options.group }) : [];
  const slopes = options.derivative === true ? basisLogSlopeRows(basis, data) : null;
  return {
    termId, x, ...bandOf(basisRows(basis, data), level),
    observedRange: term.observedRange,
    supportCount: supportCounts(term, x, options.group),
    outside: outsideRows(term, data),
    ...(slopes === null ? {} : { derivative: bandOf(slopes, []) }),
  };
}

/**
 * Estimate and band of combinations of one term's coefficients.
 *
 * @param at.rows over the term's own coefficients, `count` rows; at.first the first of them in the model; at.beside parts
 * whose error the band has too, though the estimate is the term's alone.
 * @example bandOver(model, { rows, first: term.first, count: 100, quantile: 1.96 }).upper;
 */
export function bandOver(
  model: FittedModel, at: { rows: SparseRows; first: number; count: number; quantile: number; beside?: DesignRows["parts"] },
): CurveDerivative {
  const { rows, first, count, quantile, beside = [] } = at;
  const estimate = new Float64Array(count);
  addRowsTimes(rows, model.coefficients, first, estimate);
  const standardError = rowStandardErrors(model, [...beside, { id: "", first, rows }], count);
  return {
    estimate,
    standardError,
    lower: estimate.map((value, k) => value - quantile * standardError[k]),
    upper: estimate.map((value, k) => value + quantile * standardError[k]),
  };
}
