import { describe, expect, it } from "vitest";
import { knotSplineRows, knotSplineSlopeRows, writeKnotSplines } from "@shared/engine/basis/knot-spline";
import { evenlySpaced, scaleSplines } from "@shared/engine/basis/spline-grid";
import { splineRows, splineSlopeRows } from "@shared/engine/basis/uniform-spline";
import { denseOf } from "../linalg/storages";
import { seededUniform } from "../support/generator";
import { largestDifference } from "../support/measures";
import { spline } from "../support/plain-columns";

/** A B-spline's derivative of an order (de Boor 1978, X.8). */
function splineSlope(x: number, of: { knots: readonly number[]; k: number; degree: number; order: number }): number {
  const { knots, k, degree, order } = of;
  if (order === 0) return spline(x, knots, k, degree);
  const part = (first: number) => {
    const width = knots[first + degree] - knots[first];
    return width === 0 ? 0 : splineSlope(x, { knots, k: first, degree: degree - 1, order: order - 1 }) / width;
  };
  return degree * (part(k) - part(k + 1));
}

const uniform = seededUniform(91);
const grid = { lower: -2, upper: 3, intervals: 7, wraps: false };
const step = 5 / 7;
const uniformKnots = Array.from({ length: 14 }, (_, k) => -2 + step * (k - 3));
const inside = Float64Array.from({ length: 200 }, () => -2 + 5 * uniform());
const uneven = Float64Array.of(0, 0.1, 0.15, 1, 4, 4.5);
const repeated = [0, 0, 0, ...uneven, 4.5, 4.5, 4.5];
const between = Float64Array.from({ length: 200 }, () => 4.5 * uniform());

describe("Splines are those of Cox and de Boor's recursion", () => {
  it("on equal steps", () => {
    const expected = Array.from(inside, (x) => Array.from({ length: 10 }, (_, k) => spline(x, uniformKnots, k, 3))).flat();
    expect(largestDifference(denseOf(splineRows(inside, grid), inside.length), expected)).toBeLessThan(1e-14);
  });

  it("on equal steps, their slopes", () => {
    const expected = Array.from(inside, (x) => Array.from({ length: 10 }, (_, k) => splineSlope(x, { knots: uniformKnots, k, degree: 3, order: 1 }))).flat();
    expect(largestDifference(denseOf(splineSlopeRows(inside, grid), inside.length), expected)).toBeLessThan(1e-13);
  });

  it("on a circle: those of all turns together", () => {
    const circle = { lower: -2, upper: 3, intervals: 6, wraps: true };
    const knots = Array.from({ length: 6 * 5 + 4 }, (_, k) => -2 + (5 / 6) * (k - 15));
    const expected = Array.from(inside, (x) => {
      const columns = new Array<number>(6).fill(0);
      for (let k = 0; k < 30; k++) columns[(k + 3) % 6] += spline(x, knots, k, 3);
      return columns;
    }).flat();
    const rows = splineRows(inside, circle);
    expect(largestDifference(denseOf(rows, inside.length), shifted(expected, 6))).toBeLessThan(1e-13);
    const turned = splineRows(inside.map((x) => x + 5 * 4), circle);
    expect(largestDifference(denseOf(turned, inside.length), denseOf(rows, inside.length))).toBeLessThan(1e-12);
    const slopes = [circle, { ...circle, lower: 3, upper: 8 }].map((on) => denseOf(splineSlopeRows(inside, on), inside.length));
    expect(largestDifference(slopes[0], slopes[1])).toBeLessThan(1e-12);
  });

  it.each([0, 1, 2] as const)("on knots of any spacing, their derivatives of order %i", (order) => {
    const out = new Float64Array(4);
    for (const x of between) {
      const interval = Math.max(...Array.from(uneven.keys()).filter((k) => k < uneven.length - 1 && uneven[k] <= x));
      writeKnotSplines(uneven, interval, { x, order, out, start: 0 });
      const expected = [0, 1, 2, 3].map((k) => splineSlope(x, { knots: repeated, k: interval + k, degree: 3, order }));
      const scale = Math.max(1, ...expected.map(Math.abs));
      expect(largestDifference(out.map((value) => value / scale), expected.map((value) => value / scale))).toBeLessThan(1e-12);
    }
  });
});

/** The circle's first column is the one that peaks a step after `lower`. */
function shifted(dense: number[], width: number): number[] {
  const own = denseOf(splineRows(Float64Array.of(-2), { lower: -2, upper: 3, intervals: width, wraps: true }), 1);
  const peak = own.indexOf(Math.max(...own));
  const plain = Array.from({ length: width }, (_, k) => dense.filter((_value, at) => at % width === k));
  const row = Array.from({ length: 30 }, (_, k) => spline(-2, Array.from({ length: 34 }, (__, j) => -2 + (5 / 6) * (j - 15)), k, 3));
  const found = (row.indexOf(Math.max(...row)) + 3) % width;
  return plain[0].flatMap((_value, at) => Array.from({ length: width }, (__, k) => plain[(k + found - peak + width) % width][at]));
}

describe("Beyond the knots", () => {
  it.each([["equal steps", (x: Float64Array) => splineRows(x, grid), (x: Float64Array) => splineSlopeRows(x, grid), -2, 3],
    ["knots of any spacing", (x: Float64Array) => knotSplineRows(x, uneven), (x: Float64Array) => knotSplineSlopeRows(x, uneven), 0, 4.5]] as const)(
    "each spline goes on as its tangent: %s", (_name, valuesOf, slopesOf, lower, upper) => {
      for (const [edge, away] of [[lower, -1], [upper, 1]] as const) {
        const at = Float64Array.of(edge, edge + away * 0.3, edge + away * 1e6);
        const [width] = [valuesOf(at).width];
        const [values, slopes] = [denseOf(valuesOf(at), 3), denseOf(slopesOf(at), 3)];
        for (let k = 0; k < width; k++) {
          expect(values[width + k] - values[k]).toBeCloseTo(away * 0.3 * slopes[k], 12);
          expect((values[2 * width + k] - values[k]) / 1e6).toBeCloseTo(away * slopes[k], 9);
          expect([slopes[width + k], slopes[2 * width + k]]).toEqual([slopes[k], slopes[k]]);
        }
      }
    });

  it("values sum to one and slopes to zero, at the very ends too", () => {
    const at = Float64Array.of(-2, 3, -2 - 1e-12, 3 + 1e-12, 0.142857142857, 1e4, -1e4);
    for (const rows of [splineRows(at, grid), knotSplineRows(at, uneven)]) {
      at.forEach((_x, row) => expect(rows.values.slice(4 * row, 4 * row + 4).reduce((sum, value) => sum + value, 0)).toBeCloseTo(1, 9));
    }
    for (const rows of [splineSlopeRows(at, grid), knotSplineSlopeRows(at, uneven)]) {
      at.forEach((_x, row) => expect(rows.values.slice(4 * row, 4 * row + 4).reduce((sum, value) => sum + value, 0)).toBeCloseTo(0, 12));
    }
  });

  it("rows are none for no values", () => {
    expect(splineRows(new Float64Array(0), grid).first).toHaveLength(0);
    expect(knotSplineRows(new Float64Array(0), uneven).values).toHaveLength(0);
  });
});

describe("A grid", () => {
  it("has its ends exactly, and even steps between", () => {
    const points = evenlySpaced([0.1, 0.7], 4);
    expect([points[0], points[3]]).toEqual([0.1, 0.7]);
    expect(points[2] - points[1]).toBeCloseTo(0.2, 14);
    expect([...evenlySpaced([3, 9], 2)]).toEqual([3, 9]);
  });

  it("has its rows' values multiplied row by row, in new rows", () => {
    const rows = splineRows(Float64Array.of(0, 1), grid);
    const kept = rows.values.slice();
    const scaled = scaleSplines(rows, Float64Array.of(2, -0.5));
    expect([...scaled.values]).toEqual([...kept.slice(0, 4).map((value) => 2 * value), ...kept.slice(4).map((value) => -0.5 * value)]);
    expect(rows.values).toEqual(kept);
    expect(scaled.first).toEqual(rows.first);
  });
});
