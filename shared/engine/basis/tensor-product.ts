import { EngineError } from "../errors";
import { addTransposeTimes } from "../linalg/sparse-rows";
import type { SplineRows, TensorRows } from "../linalg/sparse-rows";
import type { SmoothBasis, TensorProductBasis, TensorProductTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { numberColumn } from "./columns";
import { outsideRange } from "./ranges";
import { seenPairs } from "./seen-values";
import { gridRows, learnGrid } from "./spline-grid";
import type { LearntGrid } from "./spline-grid";

const role = "tensor-product";
/** Splines of a margin that names no size. */
export const defaultMarginSize = 5;
const largestMargin = 20;

/**
 * Products of the splines of two columns. Each margin's means over the rows are kept: the coordinates the term is fitted in
 * centre each margin by them, which leaves no main effect of either column in the products (Wood 2006).
 */
export const tensorProduct: BasisKind<TensorProductTerm, TensorProductBasis> = {
  learn(term, id, data) {
    const learnt = term.columns.map((column, k) =>
      learnGrid({ column, size: checkMargin(term.sizes?.[k] ?? defaultMarginSize, id), id, role }, data));
    const [left, right] = learnt;
    return {
      basis: {
        kind: "tensor-product",
        margins: [marginOf(left), marginOf(right)],
        ranges: [left.observedRange, right.observedRange],
      },
      rows: productOf(left.rows, right.rows),
      seen: seenPairs(left.x, right.x),
      observedRange: null,
      warnings: learnt.flatMap(({ warnings }) => warnings),
    };
  },
  rows: ({ margins: [left, right] }, data) => productOf(gridRows(left, data, role), gridRows(right, data, role)),
  logSlopeRows: () => null,
  outside(_range, { margins: [left, right], ranges }, data) {
    const second = outsideRange(ranges[1], numberColumn(data, right.column, role));
    return outsideRange(ranges[0], numberColumn(data, left.column, role)).map((flag, row) => flag | second[row]);
  },
  names: ({ margins: [left, right] }, id) =>
    Array.from({ length: left.size * right.size }, (_, k) => `${id}[${Math.floor(k / right.size) + 1},${(k % right.size) + 1}]`),
};

const productOf = (left: SplineRows, right: SplineRows): TensorRows => ({ storage: "tensor", width: left.width * right.width, left, right });

/** A margin with the means of its splines over the rows. */
function marginOf({ grid, rows, x }: LearntGrid): SmoothBasis {
  const centring = new Float64Array(grid.size);
  addTransposeTimes(rows, new Float64Array(x.length).fill(1 / x.length), centring, 0);
  return { kind: "smooth", ...grid, centring };
}

/** The products' number grows with the square of the margins'. */
function checkMargin(size: number, id: string): number {
  if (Number.isInteger(size) && size >= 4 && size <= largestMargin) return size;
  throw new EngineError("spec-invalid", `Term "${id}": a size is ${size}; both must be whole numbers from 4 to ${largestMargin}.`);
}
