import { coefficientMap } from "@shared/engine/fit/coefficient-map";
import { buildDesign } from "@shared/engine/fit/design";
import { centredPooled } from "@shared/engine/fit/local/centred-pooled";
import { hasLocal } from "@shared/engine/fit/local/check-local";
import { coordinateEdf, jointPosterior, reducedInverse } from "@shared/engine/fit/local/joint-posterior";
import { penaltyDiagonal, solveJoint } from "@shared/engine/fit/local/joint-solution";
import { jointSystem } from "@shared/engine/fit/local/joint-system";
import { lessCurves } from "@shared/engine/fit/local/less-curves";
import { localOperator } from "@shared/engine/fit/local/local-operator";
import { pooledDesign } from "@shared/engine/fit/local/pooled-design";
import { createScratch } from "@shared/engine/fit/equation-scratch";
import { normalEquations } from "@shared/engine/fit/normal-equations";
import { denseProduct } from "@shared/engine/linalg/dense-product";
import type { TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { largestDifference } from "../support/measures";
import { salesRows } from "../support/sales-rows";

const rows = salesRows(31, 80);
const terms: TermSpec[] = [
  { kind: "local-regression", column: "temperature", span: 0.6 },
  { kind: "smooth", column: "yearFraction", size: 6 },
  { kind: "local-regression", column: "price", span: 0.5 },
  { kind: "factor", column: "promotion", reference: "none" },
];
const design = buildDesign(terms, rows, 80);
const layout = pooledDesign(design);
const response = Float64Array.from(rows.logUnits);
const weights = Float64Array.from(rows.price, (price) => 0.5 + price);
const equations = normalEquations(layout.pooled, { response, weights }, createScratch(layout.pooled));
const system = jointSystem(layout, equations, []);
const penalty = penaltyDiagonal(design, Float64Array.of(3));
const joint = solveJoint(system, penalty);

describe("The joint unknowns of a model with local regressions", () => {
  it("are the other terms' coordinates, then the pooled values, those of most points last", () => {
    const distinct = (column: number[]) => new Set(column).size;
    expect(layout.fixed).toBe(design.size);
    expect(layout.locals.map(({ id }) => id)).toEqual(["price", "temperature"]);
    expect(layout.locals.map(({ count }) => count)).toEqual([distinct(rows.price), distinct(rows.temperature)]);
    expect(layout.locals.map(({ first }) => first)).toEqual([design.size, design.size + distinct(rows.price)]);
    expect(layout.size).toBe(system.size + distinct(rows.temperature));
    expect(hasLocal(terms)).toBe(true);
    expect(hasLocal(terms.slice(1, 2))).toBe(false);
  });

  it("satisfy every equation: normal ones of coordinates, pooled partial residuals of curves", () => {
    const { unknowns, curves } = joint;
    const coefficients = unknowns.slice(0, layout.fixed);
    for (let row = 0; row < layout.size; row++) {
      let left = row < layout.fixed ? penalty[row] * coefficients[row] : 0;
      for (let k = 0; k < layout.fixed; k++) left += system.cross[row * layout.size + k] * coefficients[k];
      for (const { first, count } of layout.locals) {
        const isOwn = row >= first && row < first + count;
        for (let k = first; k < first + count; k++) left += system.cross[row * layout.size + k] * (isOwn ? unknowns[k] : curves[k]);
      }
      expect(Math.abs(left - equations.vector[row])).toBeLessThan(1e-9);
    }
  });

  it("are those of the other terms alone for the response less the curves", () => {
    const { curves, unknowns } = joint;
    const own = lessCurves(layout, equations, curves);
    const left = response.map((value, row) => value - layout.locals.reduce((sum, { part, first }) =>
      sum + (part.rows.storage === "index" ? curves[first + part.rows.index[row]] : Number.NaN), 0));
    const bare = buildDesign([terms[1], terms[3]], rows, 80);
    const reference = normalEquations(bare, { response: left, weights }, createScratch(bare));
    expect(largestDifference(own.matrix, reference.matrix)).toBeLessThan(1e-12);
    // Taken about different shifts: b = A^-1 (v + shift x first column) is what they have in common.
    const shifted = own.vector.map((value, k) => value + own.shift * own.matrix[k * bare.size]);
    const expected = reference.vector.map((value, k) => value + reference.shift * reference.matrix[k * bare.size]);
    expect(largestDifference(shifted, expected)).toBeLessThan(1e-10);
    const square = own.total + 2 * own.shift * own.vector[0] + own.shift ** 2 * own.matrix[0];
    const expectedSquare = reference.total + 2 * reference.shift * reference.vector[0] + reference.shift ** 2 * reference.matrix[0];
    expect(Math.abs(square - expectedSquare)).toBeLessThan(1e-9);
    expect(unknowns.length).toBe(layout.size);
  });
});

describe("A local regression's operator", () => {
  const { basis, count } = layout.locals[0];
  const own = basis.at.map((value) => 1 + value ** 2);
  const { centred, basis: weighted } = localOperator(basis, own);

  it("gives nothing for constants, and curves whose mean over the rows is zero", () => {
    const ones = new Float64Array(count).fill(1);
    const flat = denseProduct({ values: centred, count, width: count }, { values: ones, count, width: 1 });
    expect(Math.max(...flat.map(Math.abs))).toBeLessThan(1e-13);
    const means = denseProduct({ values: basis.rows, count: 1, width: count }, { values: centred, count, width: count });
    expect(Math.max(...means.map(Math.abs))).toBeLessThan(1e-12);
  });

  it("keeps the weights with the basis, and leaves the one learnt as it was", () => {
    expect(weighted.weights).toBe(own);
    expect(basis.weights).toEqual(basis.rows);
    expect(weighted.centring.reduce((sum, value) => sum + value, 0)).toBeCloseTo(1, 12);
    expect(largestDifference(localOperator(basis, basis.rows).basis.centring, basis.centring)).toBeLessThan(1e-14);
  });

  it("has a level that constants do not move", () => {
    for (const { first, count: points } of layout.locals) {
      expect(Math.abs(system.level.subarray(first, first + points).reduce((sum, value) => sum + value, 0))).toBeLessThan(1e-13);
    }
    expect(system.level.subarray(0, layout.fixed).every((value) => value === 0)).toBe(true);
  });
});

describe("The joint posterior", () => {
  const inverse = reducedInverse(joint);
  const { covariance, coordinateEdf: edf, localEdf } = jointPosterior(joint);

  it("rests on an inverse, to 1e-10", () => {
    const { size } = system;
    const penalised = system.matrix.slice();
    for (let k = 0; k < penalty.length; k++) penalised[k * (size + 1)] += penalty[k];
    const product = denseProduct({ values: inverse, count: size, width: size }, { values: penalised, count: size, width: size });
    const identity = product.map((_, at) => (at % (size + 1) === 0 ? 1 : 0));
    expect(largestDifference(product, identity)).toBeLessThan(1e-10);
  });

  it("is A^-1 (Z'WZ + S) A^-T of the whole system, by its definition, to 1e-10", () => {
    const { size } = layout;
    // A times the covariance times A' must give Z'WZ + S back.
    const whole = system.cross.slice();
    layout.locals.forEach(({ first, count }, at) => {
      const columns = { values: system.operators[at].centred, count, width: count };
      const block = Float64Array.from({ length: size * count }, (_, k) => system.cross[Math.floor(k / count) * size + first + (k % count)]);
      const turned = denseProduct({ values: block, count: size, width: count }, columns);
      for (let row = 0; row < size; row++) {
        const isOwn = row >= first && row < first + count;
        for (let k = 0; k < count; k++) if (!isOwn) whole[row * size + first + k] = turned[row * count + k];
      }
    });
    for (let k = 0; k < penalty.length; k++) whole[k * (size + 1)] += penalty[k];
    const block = (values: Float64Array) => ({ values, count: size, width: size });
    const transposedWhole = whole.map((_, at) => whole[(at % size) * size + Math.floor(at / size)]);
    const back = denseProduct(block(denseProduct(block(whole), block(covariance))), block(transposedWhole));
    const middle = system.cross.slice();
    for (let k = 0; k < penalty.length; k++) middle[k * (size + 1)] += penalty[k];
    expect(largestDifference(back, middle)).toBeLessThan(1e-8);
  });

  it("counts one degree of freedom for each unpenalised coordinate, and fewer for penalised ones", () => {
    expect(Array.from(edf.subarray(0, design.unpenalised))).toEqual(Array.from({ length: design.unpenalised }, () => expect.closeTo(1, 12)));
    expect(edf.subarray(design.unpenalised).every((value) => value > 0 && value < 1)).toBe(true);
    expect(largestDifference(coordinateEdf(joint, inverse), edf)).toBe(0);
    expect(localEdf.every((value) => value > 1 && value < 10)).toBe(true);
  });

  it("is centred with the pooled values: a curve's mean is zero, and sure", () => {
    const centred = centredPooled(joint, covariance.slice());
    layout.locals.forEach(({ first, count }, at) => {
      const { centring } = system.operators[at].basis;
      expect(Math.abs(centring.reduce((sum, share, k) => sum + share * centred.unknowns[first + k], 0))).toBeLessThan(1e-12);
      for (let row = 0; row < layout.size; row++) {
        const own = centred.covariance.subarray(row * layout.size + first, row * layout.size + first + count);
        expect(Math.abs(centring.reduce((sum, share, k) => sum + share * own[k], 0))).toBeLessThan(1e-12);
      }
    });
    expect(coefficientMap(design).rows).toBe(design.sharedRawSize);
  });
});
