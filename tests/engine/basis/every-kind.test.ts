import { describe, expect, it } from "vitest";
import { parseModel, serialiseModel } from "@shared/engine";
import type { FittedModel, ModelData, TermBasis, TermSpec } from "@shared/engine";
import { basisLogSlopeRows, basisRows, coefficientNames, columnsOf, learnBasis, outsideRows, termId } from "@shared/engine/basis/term-basis";
import { termCoordinates } from "@shared/engine/penalty/term-transform";
import { denseOf } from "../linalg/storages";
import { largestDifference } from "../support/measures";
import { driverRows, fittedTerm, someCoefficients, transformMatrix, valuesOf } from "./term-values";

const count = 60;
const data = driverRows(16);
const kinds: Record<TermBasis["kind"], TermSpec> = {
  linear: { kind: "linear", column: "price", log: true },
  factor: { kind: "factor", column: "promotion" },
  smooth: { kind: "smooth", column: "price" },
  "scaled-smooth": { kind: "smooth", column: "price", by: "temperature", log: true },
  "levelled-smooth": { kind: "smooth", column: "price", by: "promotion" },
  "cyclic-smooth": { kind: "cyclic-smooth", column: "week", period: [0, 52] },
  "natural-spline": { kind: "natural-spline", column: "price", df: 4 },
  "local-regression": { kind: "local-regression", column: "price", span: 0.5 },
  "tensor-product": { kind: "tensor-product", columns: ["price", "temperature"] },
  "random-walk": { kind: "random-walk", column: "week" },
  "random-effect": { kind: "random-effect", column: "store", by: "temperature" },
  "factor-smooth": { kind: "factor-smooth", column: "price", group: "store" },
};

describe.each(Object.entries(kinds))("A learnt %s", (kind, spec) => {
  const learnt = learnBasis(spec, data);
  const { basis, rows } = learnt;

  it("is of the kind meant", () => {
    expect(basis.kind).toBe(kind);
  });

  it("has for the rows it learnt from the rows it was learnt with", () => {
    const again = basisRows(basis, data);
    // A local regression learns with the pooling of rows, and draws by its operator.
    if (kind === "local-regression") expect(again.storage).toBe("dense");
    else expect(denseOf(again, count)).toEqual(denseOf(rows, count));
  });

  it("gives every row by itself as among others", () => {
    const all = denseOf(basisRows(basis, data), count);
    for (const row of [0, 17, 59]) {
      const alone: ModelData = Object.fromEntries(Object.entries(data).map(([name, column]) => [name, [column[row]]])) as ModelData;
      expect(denseOf(basisRows(basis, alone), 1)).toEqual(all.subarray(row * rows.width, (row + 1) * rows.width));
    }
  });

  it("flags none of the rows it learnt from as outside", () => {
    const term = fittedTerm(spec, data, columnsOf(spec));
    expect([...outsideRows(term, data)]).toEqual(new Array<number>(count).fill(0));
  });

  it("has a name for every column, all different, as many as its coordinates' coefficients", () => {
    const names = coefficientNames(basis, termId(spec));
    expect(names).toHaveLength(rows.width);
    expect(new Set(names).size).toBe(rows.width);
    expect(names.every((name) => name.startsWith(termId(spec)))).toBe(true);
    expect(termCoordinates(basis).rawWidth).toBe(rows.width);
  });

  it("counts every row once among what it saw", () => {
    expect(learnt.seen.counts.reduce((sum, own) => sum + own, 0)).toBe(count);
    expect(learnt.seen.values).toHaveLength(learnt.seen.counts.length);
  });

  it("is plain data that survives its text to the last bit", () => {
    const model = { format: 1, spec: {}, terms: [{ basis, seen: learnt.seen }], warnings: [], fitted: new Float64Array(0), coefficients: new Float64Array(0), covariance: new Float64Array(0), groupCovariance: null } as unknown as FittedModel;
    const [read] = parseModel(serialiseModel(model)).terms;
    expect(read.basis).toEqual(basis);
    expect(read.seen).toEqual(learnt.seen);
    expect(denseOf(basisRows(read.basis, data), count)).toEqual(denseOf(basisRows(basis, data), count));
  });

  it("leaves data as they were, and needs no column but its own", () => {
    const before = structuredClone(data);
    const own = Object.fromEntries(columnsOf(spec).map((name) => [name, data[name as keyof typeof data]])) as ModelData;
    expect(learnBasis(spec, own).basis).toEqual(basis);
    expect(data).toEqual(before);
  });

  it("has slopes by ln x that differences of its values come to, or none", () => {
    const inside = { ...data, price: data.price.map((price) => Math.min(Math.max(price, 1.05), 2.8)) };
    const slopes = basisLogSlopeRows(basis, inside);
    const isNumber = !["factor", "random-effect", "random-walk", "tensor-product"].includes(kind);
    expect(slopes !== null).toBe(isNumber);
    // A local polynomial's own slope is an estimate of the curve's, not its derivative.
    if (slopes === null || kind === "local-regression") return;
    const [column] = columnsOf(spec) as ("price" | "week")[];
    const coefficients = someCoefficients(rows.width);
    const step = 1e-5;
    const moved = (by: number) =>
      valuesOf(basisRows(basis, { ...inside, [column]: inside[column].map((value) => value * Math.exp(by)) }), coefficients, count);
    const [above, below] = [moved(step), moved(-step)];
    const differences = above.map((value, row) => (value - below[row]) / (2 * step));
    const own = valuesOf(slopes, coefficients, count);
    const size = Math.max(...own.map(Math.abs));
    // Central differences err by step^2 x third derivative, and by step x a jump of it at a knot; relative to the largest slope.
    expect(largestDifference(own, differences) / size).toBeLessThan(1e-5);
  });

  it("has coordinates with finite coefficients and columns that are not zero", () => {
    const { transform, rawWidth, unpenalised, penalised } = termCoordinates(basis);
    if (unpenalised + penalised === 0) return expect(kind).toBe("local-regression");
    const { matrix, width } = transformMatrix(transform, rawWidth);
    expect(width).toBe(unpenalised + penalised);
    for (let column = 0; column < width; column++) {
      const square = Array.from({ length: rawWidth }, (_, raw) => matrix[raw * width + column] ** 2).reduce((sum, value) => sum + value, 0);
      expect(square).toBeGreaterThan(1e-6);
      expect(square).toBeLessThan(1e12);
    }
  });
});
