import type { LinearBasis, LinearTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { covariate, numberColumn } from "./columns";
import { outsideRange, rangeOf } from "./ranges";
import { seenNumbers } from "./seen-values";

const role = "linear";

/**
 * A straight line: one column, x (or ln x) less its mean over the fitted rows. Its standard deviation is kept too: fitting
 * divides by it, without which cross-products of columns of unlike size lose their digits (Longley 1967).
 */
export const linear: BasisKind<LinearTerm, LinearBasis> = {
  learn(term, _id, data) {
    const x = covariate(data, term, role);
    const isLog = term.log === true;
    const seen = seenNumbers(isLog ? numberColumn(data, term.column, role) : x);
    const centre = mean(x);
    const values = new Float64Array(x.length);
    let squares = 0;
    for (let row = 0; row < x.length; row++) {
      values[row] = x[row] - centre;
      squares += values[row] * values[row];
    }
    const spread = Math.sqrt(squares / x.length);
    // What is left of a constant column is rounding: kept at zero, so that it is found to be the intercept's and dropped.
    const isConstant = !(spread > 1e-13 * Math.abs(centre));
    if (isConstant) values.fill(0);
    return {
      basis: { kind: "linear", column: term.column, log: isLog, centre, scale: isConstant ? 1 : spread },
      rows: { storage: "single", width: 1, values },
      seen,
      observedRange: rangeOf(seen.values),
      warnings: [],
    };
  },
  rows(basis, data) {
    const values = covariate(data, basis, role).map((value) => value - basis.centre);
    return { storage: "single", width: 1, values };
  },
  logSlopeRows(basis, data) {
    const x = numberColumn(data, basis.column, role);
    return { storage: "single", width: 1, values: basis.log ? new Float64Array(x.length).fill(1) : x.slice() };
  },
  outside: (range, basis, data) => outsideRange(range, numberColumn(data, basis.column, role)),
  names: (_basis, id) => [id],
};

function mean(values: Float64Array): number {
  let sum = 0;
  for (let row = 0; row < values.length; row++) sum += values[row];
  const first = sum / values.length;
  let correction = 0;
  for (let row = 0; row < values.length; row++) correction += values[row] - first;
  return first + correction / values.length;
}
