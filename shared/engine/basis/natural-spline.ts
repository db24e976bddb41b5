import { EngineError } from "../errors";
import type { NaturalSplineBasis, NaturalSplineTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { covariate, numberColumn } from "./columns";
import { checkDistinct } from "./curve-checks";
import { knotSplineRows, knotSplineSlopeRows } from "./knot-spline";
import { outsideRange, rangeOf } from "./ranges";
import { seenNumbers } from "./seen-values";
import { scaleSplines } from "./spline-grid";

const role = "natural-spline";

/**
 * Cubic B-splines with boundary knots at the range and df - 1 inner knots at evenly spread quantiles of the rows; the
 * coordinates the term is fitted in make the curve natural (Hastie, Tibshirani & Friedman 2009, section 5.2.1).
 */
export const naturalSpline: BasisKind<NaturalSplineTerm, NaturalSplineBasis> = {
  learn(term, id, data) {
    const x = covariate(data, term, role);
    const isLog = term.log === true;
    const seen = seenNumbers(isLog ? numberColumn(data, term.column, role) : x);
    checkDistinct(seen.values, term.column, id);
    const knots = quantilesOf(x, term.df);
    checkKnots(knots, term, id);
    return {
      basis: { kind: "natural-spline", column: term.column, log: isLog, knots, centring: new Float64Array(knots.length + 2) },
      rows: knotSplineRows(x, knots),
      seen,
      observedRange: rangeOf(seen.values),
      warnings: [],
    };
  },
  rows: (basis, data) => knotSplineRows(covariate(data, basis, role), basis.knots),
  logSlopeRows(basis, data) {
    const rows = knotSplineSlopeRows(covariate(data, basis, role), basis.knots);
    return basis.log ? rows : scaleSplines(rows, numberColumn(data, basis.column, role));
  },
  outside: (range, basis, data) => outsideRange(range, numberColumn(data, basis.column, role)),
  names: (basis, id) => Array.from({ length: basis.knots.length + 2 }, (_, k) => `${id}[${k + 1}]`),
};

/** The ends and the quantiles of order k / df between, by linear interpolation (type 7 of Hyndman & Fan 1996). */
function quantilesOf(x: Float64Array, df: number): Float64Array {
  const sorted = x.slice().sort();
  const knots = new Float64Array(df + 1);
  for (let k = 0; k <= df; k++) {
    const position = ((sorted.length - 1) * k) / df;
    const below = Math.floor(position);
    const above = Math.min(below + 1, sorted.length - 1);
    knots[k] = sorted[below] + (position - below) * (sorted[above] - sorted[below]);
  }
  return knots;
}

function checkKnots(knots: Float64Array, term: NaturalSplineTerm, id: string): void {
  const width = knots[knots.length - 1] - knots[0];
  const tied = knots.findIndex((knot, k) => k > 0 && !(knot - knots[k - 1] > 1e-9 * width));
  if (tied < 0) return;
  const shown = term.log === true ? Math.exp(knots[tied]) : knots[tied];
  throw new EngineError(
    "column-few-values",
    `Term "${id}": with df ${term.df} two knots fall on ${Number(shown.toPrecision(12))}, a value that many rows of column "${term.column}" share; use a smaller df.`,
  );
}
