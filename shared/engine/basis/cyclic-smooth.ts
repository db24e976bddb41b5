import { EngineError } from "../errors";
import type { CyclicSmoothBasis, CyclicSmoothTerm } from "../types";
import { areAlike, isLong, repeatRows } from "./alike-rows";
import type { BasisKind } from "./basis-kind";
import { numberColumn } from "./columns";
import { checkDistinct, checkSize, fewValuesWarning } from "./curve-checks";
import { distinctValues } from "./distinct-values";
import { rangeOf } from "./ranges";
import { seenNumbers } from "./seen-values";
import { scaleSplines } from "./spline-grid";
import { splineRows, splineSlopeRows } from "./uniform-spline";

const role = "cyclic-smooth";
/** Splines of a circle that names no size. */
export const defaultCyclicSize = 12;

/** Cubic B-splines on a circle: `size` equal intervals over the period, as many splines (Eilers & Marx 2010, section 6). */
export const cyclicSmooth: BasisKind<CyclicSmoothTerm, CyclicSmoothBasis> = {
  learn(term, id, data) {
    const size = checkSize(term.size ?? defaultCyclicSize, id);
    const [lower, upper] = checkPeriod(term.period, id);
    const x = numberColumn(data, term.column, role);
    const distinct = isLong(x.length) ? distinctValues(x) : undefined;
    const seen = seenNumbers(x, distinct);
    checkDistinct(seen.values, term.column, id);
    const basis: CyclicSmoothBasis = { kind: "cyclic-smooth", column: term.column, size, lower, upper, centring: new Float64Array(size) };
    return {
      basis,
      rows: areAlike(distinct, x.length) ? repeatRows(splineRows(distinct.values, gridOf(basis)), distinct.codes) : splineRows(x, gridOf(basis)),
      seen,
      observedRange: rangeOf(seen.values),
      warnings: fewValuesWarning(seen.values.length, size, id),
    };
  },
  rows: (basis, data) => splineRows(numberColumn(data, basis.column, role), gridOf(basis)),
  logSlopeRows(basis, data) {
    const x = numberColumn(data, basis.column, role);
    return scaleSplines(splineSlopeRows(x, gridOf(basis)), x);
  },
  // Every position on a circle has neighbours on both sides: nothing is extrapolated; support counts tell where it is thin.
  outside: (_range, basis, data) => new Uint8Array(numberColumn(data, basis.column, role).length),
  names: (basis, id) => Array.from({ length: basis.size }, (_, k) => `${id}[${k + 1}]`),
};

const gridOf = (basis: CyclicSmoothBasis) => ({ lower: basis.lower, upper: basis.upper, intervals: basis.size, wraps: true });

function checkPeriod(period: readonly number[], id: string): readonly number[] {
  const isPair = Array.isArray(period) && period.length === 2 && period.every(Number.isFinite);
  if (!isPair || !(period[1] > period[0])) {
    throw new EngineError("spec-invalid", `Term "${id}": period is ${JSON.stringify(period)}; it must be two finite numbers, the second larger.`);
  }
  return period;
}
