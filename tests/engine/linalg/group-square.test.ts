import fc from "fast-check";
import { expect, it } from "vitest";
import { groupSquare } from "@shared/engine/linalg/group-square";
import type { SparseRows } from "@shared/engine/linalg/sparse-rows";
import { denseOf, plainCrossProduct, unsigned, weightsOf } from "./storages";

const runs = { numRuns: 40, seed: 20260102 };
const count = 23;
const groups = 3;
const starts = (limit: number) => fc.array(fc.nat(limit), { minLength: count, maxLength: count });

type Grouped = { width: number; rows: (group: readonly number[]) => fc.Arbitrary<SparseRows> };

/** Terms on groups: a level, a slope, and curves of six and of four splines. */
const terms: Record<string, Grouped> = {
  level: { width: 1, rows: (group) => fc.constant({ storage: "index", width: groups, index: Int32Array.from(group), values: null }) },
  slope: { width: 1, rows: (group) => weightsOf(count).map((values) => ({ storage: "index", width: groups, index: Int32Array.from(group), values })) },
  "curve of six": { width: 6, rows: (group) => curve(group, 6) },
  "curve of four": { width: 4, rows: (group) => curve(group, 4) },
};

const curve = (group: readonly number[], size: number): fc.Arbitrary<SparseRows> =>
  fc.tuple(starts(size - 4), weightsOf(4 * count)).map(([start, values]) => ({
    storage: "spline", width: groups * size, wraps: false, first: Int32Array.from(group, (own, row) => own * size + start[row]), values,
  }));

const pairs = Object.keys(terms).flatMap((left) => Object.keys(terms).map((right) => [left, right] as const));

it.each(pairs)("blocks of a %s and a %s on the same groups are the diagonal blocks of the whole cross-product", (leftName, rightName) => {
  const left = terms[leftName];
  const right = terms[rightName];
  const rows = starts(groups - 1).chain((group) => fc.tuple(left.rows(group), right.rows(group), weightsOf(count)));
  fc.assert(fc.property(rows, ([leftRows, rightRows, weights]) => {
    const square = left.width * right.width;
    const out = new Float64Array(groups * square).fill(7);
    groupSquare({ rows: leftRows, width: left.width }, { rows: rightRows, width: right.width }, { count: groups, weights }, out);
    const whole = plainCrossProduct(
      { matrix: denseOf(leftRows, count), width: leftRows.width }, { matrix: denseOf(rightRows, count), width: rightRows.width }, weights,
    );
    const expected = out.map((_, at) => {
      const group = Math.floor(at / square);
      const i = Math.floor((at % square) / right.width);
      const j = at % right.width;
      return whole[(group * left.width + i) * rightRows.width + group * right.width + j];
    });
    expect(unsigned(out)).toEqual(unsigned(expected));
  }), runs);
});
