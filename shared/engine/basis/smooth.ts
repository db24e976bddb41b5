import type { SmoothBasis, SmoothTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { numberColumn } from "./columns";
import { outsideRange } from "./ranges";
import { gridLogSlopes, gridRows, learnGrid } from "./spline-grid";

const role = "smooth";
/** Splines of a smooth that names no size. */
export const defaultSmoothSize = 10;

/** Cubic B-splines on equally spaced knots over the observed range, a little widened (Eilers & Marx 1996). */
export const smooth: BasisKind<SmoothTerm, SmoothBasis> = {
  learn(term, id, data) {
    const { grid, rows, seen, observedRange, warnings } = learnGrid({ column: term.column, log: term.log, size: term.size ?? defaultSmoothSize, id, role }, data);
    const { column, log, size, lower, upper } = grid;
    return { basis: { kind: "smooth", column, log, size, lower, upper, centring: new Float64Array(size) }, rows, seen, observedRange, warnings };
  },
  rows: (basis, data) => gridRows(basis, data, role),
  logSlopeRows: (basis, data) => gridLogSlopes(basis, data, role),
  outside: (range, basis, data) => outsideRange(range, numberColumn(data, basis.column, role)),
  names: (basis, id) => Array.from({ length: basis.size }, (_, k) => `${id}[${k + 1}]`),
};
