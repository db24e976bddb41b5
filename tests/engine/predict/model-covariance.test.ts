import { covarianceQuadratic, designRows, fitModel, predict } from "@shared/engine";
import type { FittedModel, ModelData, TermSpec } from "@shared/engine";
import { sparseVarianceOf } from "@shared/engine/predict/model-covariance";
import { describe, expect, it } from "vitest";
import { everyKindRows, modelOf } from "../support/every-kind-rows";
import { seededNormal } from "../support/generator";
import { largestDifference } from "../support/measures";
import { denseCovariance, denseRows, smallestEigenvalue } from "./dense-covariance";

const rows = everyKindRows(21, 80);
const price: TermSpec = { kind: "smooth", column: "price", log: true, size: 6 };
const models: [string, TermSpec[]][] = [
  ["no groups", [price, { kind: "factor", column: "promotion" }]],
  ["a level per group", [price, { kind: "random-effect", column: "store" }]],
  ["a level and a slope per group", [price, { kind: "random-effect", column: "store" }, { kind: "random-effect", column: "store", by: "depth" }]],
  ["curves per group", [price, { kind: "factor-smooth", column: "price", log: true, group: "store", size: 4 }]],
  ["curves and slopes per group", [price, { kind: "factor-smooth", column: "price", log: true, group: "store", size: 4 }, { kind: "random-effect", column: "store", by: "depth" }]],
  ["two columns of groups", [price, { kind: "random-effect", column: "store" }, { kind: "random-effect", column: "promotion" }]],
];

describe.each(models)("The covariance of a model with %s", (_name, terms) => {
  const model: FittedModel = fitModel(modelOf("quasi-poisson", terms), rows);
  const size = model.coefficients.length;
  const dense = denseCovariance(model);

  it("is symmetric and, but for rounding, positive semidefinite", () => {
    const largest = Math.max(...Array.from({ length: size }, (_, k) => dense[k * (size + 1)]));
    for (let i = 0; i < size; i++) for (let j = 0; j < i; j++) expect(Math.abs(dense[i * size + j] - dense[j * size + i])).toBeLessThan(1e-13 * largest);
    expect(smallestEigenvalue(dense, size)).toBeGreaterThan(-1e-12 * largest);
  });

  it("gives any two combinations their covariance, as the dense matrix does", () => {
    const normal = seededNormal(2);
    for (let trial = 0; trial < 20; trial++) {
      const [left, right] = [0, 1].map(() => Float64Array.from({ length: size }, () => (trial % 2 === 0 || normal() > 1 ? normal() : 0)));
      let plain = 0;
      let scale = 0;
      for (let i = 0; i < size; i++) {
        for (let j = 0; j < size; j++) {
          plain += left[i] * dense[i * size + j] * right[j];
          scale += Math.abs(left[i] * dense[i * size + j] * right[j]);
        }
      }
      expect(Math.abs(covarianceQuadratic(model, left, right) - plain)).toBeLessThan(1e-13 * (scale + 1e-3));
    }
  });

  it("gives every row the standard error that predictions show, of sparse rows as of whole ones", () => {
    const { standardError } = predict(model, rows);
    const whole = denseRows(designRows(model, rows), size);
    const sparse = sparseVarianceOf(model);
    const indices = Int32Array.from({ length: size }, (_, k) => k);
    const errors = whole.map((row) => Math.sqrt(covarianceQuadratic(model, row, row)));
    expect(largestDifference(errors, standardError)).toBeLessThan(1e-12);
    expect(largestDifference(whole.map((row) => Math.sqrt(sparse(indices, row, size))), standardError)).toBeLessThan(1e-12);
  });
});

/** Normal equations of the whole, groups among all other columns: (X'WX + S)^-1 by hand. */
describe("A normal model's covariance with levels per group", () => {
  const penalty = 2.5;
  const data: ModelData = { y: rows.y, depth: rows.depth, store: rows.store };
  const model = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "linear", column: "depth" }, { kind: "random-effect", column: "store", smoothness: { penalty } }] }, data);

  it("is that of ridge regression on all columns", () => {
    const size = model.coefficients.length;
    const whole = denseRows(designRows(model, data), size);
    const covariance = denseCovariance(model);
    // (X'X + S) x covariance / dispersion is the identity.
    for (let i = 0; i < size; i++) {
      for (let j = 0; j < size; j++) {
        let entry = 0;
        for (let k = 0; k < size; k++) {
          const product = whole.reduce((sum, row) => sum + row[i] * row[k], 0) + (i === k && i >= 2 ? penalty : 0);
          entry += (product * covariance[k * size + j]) / model.dispersion;
        }
        expect(entry).toBeCloseTo(Number(i === j), 10);
      }
    }
  });
});
