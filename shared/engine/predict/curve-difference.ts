import { basisRows } from "../basis/term-basis";
import { gatherRow, roomForRow } from "../linalg/sparse-rows";
import type { DenseRows, SparseRows } from "../linalg/sparse-rows";
import type { BandKind, CurveDifference, FittedModel } from "../types";
import { curvePoints } from "./curve-points";
import { drawnCurve } from "./drawn-curve";
import { findTerm } from "./find-term";
import { normalQuantile } from "./level";
import { bandOver } from "./term-curve";

export type CurveDifferenceOptions = {
  /** Values in the column's own unit, or names. */
  at: Float64Array | readonly number[] | readonly string[];
  /** The value that all others are taken relative to. */
  from: number | string;
  group?: string;
  level?: number;
  /** Default: the model's own. The level a curve stands on cancels: with-mean is pointwise. */
  band?: BandKind;
};

/**
 * A term's curve relative to one value of its column, on the link scale: f(x) - f(from), with the band of the difference, in
 * which what both share cancels. The difference is linear in the coefficients, so the band is exact. At `from` both are zero.
 *
 * @returns arrays of the length of `at`.
 * @throws EngineError as `termCurve`.
 * Cost: as `termCurve`, O(points x coefficients of the curve^2).
 * @example curveDifference(model, "price", { at: [1.49, 1.99], from: 1.99, level: 0.8 }).estimate; // [0.62, 0]
 */
export function curveDifference(model: FittedModel, termId: string, options: CurveDifferenceOptions): CurveDifference {
  const { at, from, group, level = 0.95, band } = options;
  const term = findTerm(model, termId);
  const asked: (number | string)[] = [...at, from];
  const x = curvePoints(term, { at: asked as number[] | string[] });
  const drawn = drawnCurve(model, term, { x, group, band });
  const count = x.length - 1;
  const rows = lessLast(basisRows(drawn.basis, drawn.data), count);
  return { termId, x: x.slice(0, count), ...bandOver(drawn.model, { rows, first: drawn.term.first, count, quantile: normalQuantile(level) }) };
}

/** Each of the first rows less the one after them. */
function lessLast(rows: SparseRows, count: number): DenseRows {
  const { width } = rows;
  const room = roomForRow(rows);
  const values = new Float64Array(count * width);
  const add = (row: number, sign: number, to: number) => {
    const used = gatherRow(rows, row, 0, { ...room, count: 0 });
    for (let k = 0; k < used; k++) values[to * width + room.indices[k]] += sign * room.values[k];
  };
  for (let row = 0; row < count; row++) {
    add(row, 1, row);
    add(count, -1, row);
  }
  return { storage: "dense", width, values };
}
