import type { ScaledSmoothBasis, SmoothTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { numberColumn } from "./columns";
import { outsideRange } from "./ranges";
import { defaultSmoothSize } from "./smooth";
import { gridLogSlopes, gridRows, learnGrid, scaleSplines } from "./spline-grid";

const role = "smooth";
const byRole = "smooth's by";

/** A smooth of a column that names a column of numbers to be multiplied by. */
export type ScaledSmoothTerm = SmoothTerm & { by: string };

/**
 * A varying coefficient (Hastie & Tibshirani 1993): the splines of a smooth times the column `by`. Nothing is centred,
 * since the mean of such a curve is what `by` does on average, not a level.
 */
export const scaledSmooth: BasisKind<ScaledSmoothTerm, ScaledSmoothBasis> = {
  learn(term, id, data) {
    const { grid, rows, seen, observedRange, warnings } = learnGrid({ column: term.column, log: term.log, size: term.size ?? defaultSmoothSize, id, role }, data);
    const basis: ScaledSmoothBasis = { kind: "scaled-smooth", ...grid, by: term.by };
    return { basis, rows: scaleSplines(rows, numberColumn(data, term.by, byRole)), seen, observedRange, warnings };
  },
  rows: (basis, data) => scaleSplines(gridRows(basis, data, role), numberColumn(data, basis.by, byRole)),
  logSlopeRows: (basis, data) => scaleSplines(gridLogSlopes(basis, data, role), numberColumn(data, basis.by, byRole)),
  outside: (range, basis, data) => outsideRange(range, numberColumn(data, basis.column, role)),
  names: (basis, id) => Array.from({ length: basis.size }, (_, k) => `${id}[${k + 1}]`),
};
