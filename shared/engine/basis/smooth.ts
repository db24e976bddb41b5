import { EngineError } from "../errors";
import type { ModelWarning, SmoothBasis, SmoothTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { covariate, numberColumn } from "./columns";
import { outsideRange, rangeOf } from "./ranges";
import { seenNumbers } from "./seen-values";
import { splineRows, splineSlopeRows } from "./uniform-spline";

const role = "smooth";
const defaultSize = 10;
/** Share of the range's width by which the knots reach beyond it at each end. */
const widening = 0.001;

/** Cubic B-splines on equally spaced knots over the observed range, a little widened (Eilers & Marx 1996). */
export const smooth: BasisKind<SmoothTerm, SmoothBasis> = {
  learn(term, id, data) {
    const size = checkSize(term.size ?? defaultSize, id);
    const x = covariate(data, term, role);
    const isLog = term.log === true;
    const seen = seenNumbers(isLog ? numberColumn(data, term.column, role) : x);
    checkDistinct(seen.values, term.column, id);
    const observedRange = rangeOf(seen.values);
    const smallest = isLog ? Math.log(observedRange[0]) : observedRange[0];
    const largest = isLog ? Math.log(observedRange[1]) : observedRange[1];
    const margin = widening * (largest - smallest);
    const basis: SmoothBasis = {
      kind: "smooth",
      column: term.column,
      log: isLog,
      size,
      lower: smallest - margin,
      upper: largest + margin,
      centring: new Float64Array(size),
    };
    return {
      basis, seen, observedRange,
      rows: splineRows(x, gridOf(basis)),
      warnings: fewValuesWarning(seen.values.length, size, id),
    };
  },
  rows: (basis, data) => splineRows(covariate(data, basis, role), gridOf(basis)),
  logSlopeRows(basis, data) {
    const rows = splineSlopeRows(covariate(data, basis, role), gridOf(basis));
    if (basis.log || rows.storage !== "spline") return rows;
    const x = numberColumn(data, basis.column, role);
    return { ...rows, values: rows.values.map((slope, at) => slope * x[at >> 2]) };
  },
  outside: (range, basis, data) => outsideRange(range, numberColumn(data, basis.column, role)),
  names: (basis, id) => Array.from({ length: basis.size }, (_, k) => `${id}[${k + 1}]`),
};

const gridOf = (basis: SmoothBasis) => ({ lower: basis.lower, upper: basis.upper, intervals: basis.size - 3, wraps: false });

/** @throws EngineError spec-invalid unless a whole number from 4 to 200. */
export function checkSize(size: number, id: string): number {
  if (!Number.isInteger(size) || size < 4 || size > 200) {
    throw new EngineError("spec-invalid", `Term "${id}": size is ${size}; it must be a whole number from 4 to 200.`);
  }
  return size;
}

/** @throws EngineError column-constant, column-few-values. */
export function checkDistinct(distinct: Float64Array, column: string, id: string): void {
  const count = distinct.length;
  if (count === 1) {
    throw new EngineError("column-constant", `Term "${id}": column "${column}" is constant (${distinct[0]}); a curve needs values that vary.`);
  }
  if (count < 4) {
    throw new EngineError(
      "column-few-values",
      `Term "${id}": column "${column}" has ${count} distinct values; a curve needs at least 4. Use a straight line or a factor.`,
    );
  }
}

/** Fewer distinct values than splines: the penalty carries the fit between them, which deserves a word. */
export function fewValuesWarning(distinct: number, size: number, id: string): ModelWarning[] {
  if (distinct >= size) return [];
  return [{
    code: "few-distinct-values",
    term: id,
    message: `Term "${id}" has ${distinct} distinct values for a curve of size ${size}: between them its shape comes from the smoothness penalty alone.`,
  }];
}
