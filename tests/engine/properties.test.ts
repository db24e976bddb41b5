import { designRows, designTransposeTimes, fitModel, predict, termCurve } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { splineRows } from "@shared/engine/basis/uniform-spline";
import { describe, expect, it } from "vitest";
import { seededUniform } from "./support/generator";
import { largestDifference, largestRelativeDifference } from "./support/measures";
import { gaussianSpec, priceCurve, quasiPoissonSpec, salesRows, seasonCurve } from "./support/sales-rows";

const data = salesRows(7);
const both = [["gaussian", gaussianSpec], ["quasi-poisson", quasiPoissonSpec]] as const;
const termOf = (model: FittedModel, id: string) => model.terms.find((term) => term.id === id)!;

/** The same rows, in the order given. */
function reorder(order: number[]) {
  return Object.fromEntries(Object.entries(data).map(([name, column]) => [name, order.map((row) => column[row])])) as typeof data;
}

describe("Spline bases", () => {
  it.each([false, true])("sum to one in every row, inside and far outside the range (circle: %s)", (wraps) => {
    const uniform = seededUniform(3);
    const x = Float64Array.from({ length: 500 }, () => 20 * uniform() - 10);
    const rows = splineRows(x, { lower: -1, upper: 2, intervals: 9, wraps });
    if (rows.storage !== "spline") throw new Error("splines are stored as splines");
    for (let row = 0; row < x.length; row++) {
      expect(rows.values.slice(4 * row, 4 * row + 4).reduce((sum, value) => sum + value, 0)).toBeCloseTo(1, 12);
      expect(rows.first[row]).toBeGreaterThanOrEqual(0);
      expect(rows.first[row]).toBeLessThan(9);
    }
  });
});

describe.each(both)("A %s model", (_name, spec) => {
  const model = fitModel(spec, data);

  it("converges and says nothing against these rows", () => {
    expect(model.converged).toBe(true);
    expect(model.warnings.filter(({ code }) => code !== "straight-line")).toEqual([]);
  });

  it("has contributions that sum to the linear predictor", () => {
    const { contributions, linearPredictor, mean } = predict(model, data);
    const sums = linearPredictor.map((_, row) => Object.values(contributions).reduce((sum, part) => sum + part[row], 0));
    expect(largestDifference(sums, linearPredictor)).toBeLessThan(1e-10);
    expect(largestRelativeDifference(mean, model.fitted)).toBeLessThan(1e-12);
    expect(Object.keys(contributions)).toEqual(["intercept", "price", "yearFraction", "promotion", "temperature", "offset"]);
  });

  it("centres curves and lines over the rows, and puts a factor's reference at zero", () => {
    const { contributions } = predict(model, data);
    for (const id of ["price", "yearFraction", "temperature"]) {
      expect(Math.abs(contributions[id].reduce((sum, value) => sum + value, 0) / contributions[id].length)).toBeLessThan(1e-12);
    }
    data.promotion.forEach((level, row) => {
      if (level === "none") expect(contributions.promotion[row]).toBe(0);
    });
  });

  it("does not depend on the order of rows", () => {
    const order = data.price.map((_, row) => (row * 37 + 11) % data.price.length);
    const other = fitModel(spec, reorder(order));
    expect(largestRelativeDifference(other.fitted, order.map((row) => model.fitted[row]))).toBeLessThan(1e-7);
    expect(Math.abs(other.edf - model.edf)).toBeLessThan(1e-6);
  });

  it("does not depend on the unit of a covariate", () => {
    const scaled = { ...data, price: data.price.map((value) => 100 * value), temperature: data.temperature.map((value) => 32 + 1.8 * value) };
    const other = fitModel(spec, scaled);
    expect(largestRelativeDifference(other.fitted, model.fitted)).toBeLessThan(1e-7);
    expect(largestRelativeDifference(other.terms.map(({ edf }) => edf), model.terms.map(({ edf }) => edf))).toBeLessThan(1e-6);
  });

  it("counts whole rows the same as rows of weight zero beside them", () => {
    const extra = Object.fromEntries(Object.entries(data).map(([name, column]) => [name, [...column, column[0], column[1]]])) as typeof data;
    const weighted = { ...extra, weight: [...data.price.map(() => 1), 0, 0] };
    const other = fitModel({ ...spec, weights: "weight" }, weighted);
    expect(other.rowCount).toBe(data.price.length);
    expect(Array.from(other.fitted.slice(0, -2))).toEqual(Array.from(model.fitted));
    expect(largestRelativeDifference(other.fitted.slice(-2), model.fitted.slice(0, 2))).toBeLessThan(1e-12);
  });

  it.each([2, 3.7, 6])("spends the %d degrees of freedom asked for", (df) => {
    const [, ...others] = spec.terms;
    const asked = fitModel({ ...spec, terms: [{ ...priceCurve, smoothness: { df } }, ...others] }, data);
    expect(Math.abs(termOf(asked, "price").edf - df)).toBeLessThan(1e-8);
    expect(asked.converged).toBe(true);
  });

  it("spends them on a circle too, with another term's beside them", () => {
    const asked = fitModel({ ...spec, terms: [{ ...priceCurve, smoothness: { df: 2.5 } }, { ...seasonCurve, smoothness: { df: 0.4 } }] }, data);
    expect(Math.abs(termOf(asked, "price").edf - 2.5)).toBeLessThan(1e-8);
    expect(Math.abs(termOf(asked, "yearFraction").edf - 0.4)).toBeLessThan(1e-8);
  });

  it("is a straight line under a penalty without end", () => {
    const stiff = fitModel({ ...spec, terms: [{ ...priceCurve, smoothness: { penalty: 1e13 } }] }, data);
    const line = fitModel({ ...spec, terms: [{ kind: "linear", column: "price", log: true }] }, data);
    expect(largestRelativeDifference(stiff.fitted, line.fitted)).toBeLessThan(1e-7);
    expect(termOf(stiff, "price").edf).toBeCloseTo(1, 7);
  });

  it("has a line's band zero at its centre, opening on both sides", () => {
    const term = termOf(model, "temperature");
    if (term.basis.kind !== "linear") throw new Error("temperature enters as a line");
    const { centre } = term.basis;
    const curve = termCurve(model, "temperature", { at: [centre - 4, centre, centre + 4] });
    expect(curve.standardError[1]).toBe(0);
    expect(curve.standardError[0]).toBeCloseTo(curve.standardError[2], 12);
    expect(curve.upper[0]).toBeGreaterThan(curve.estimate[0]);
  });

  it("goes on as a straight line beyond the range and says so", () => {
    const curve = termCurve(model, "price", { at: [0.125, 0.25, 0.5, 1.2, 4, 8, 16] });
    expect(curve.estimate[0] - curve.estimate[1]).toBeCloseTo(curve.estimate[1] - curve.estimate[2], 10);
    expect(curve.estimate[4] - curve.estimate[5]).toBeCloseTo(curve.estimate[5] - curve.estimate[6], 10);
    expect(Array.from(curve.outside)).toEqual([1, 1, 1, 0, 1, 1, 1]);
    expect(Array.from(curve.supportCount.slice(4))).toEqual([0, 0, 0]);
  });

  it("has derivatives that are the curve's own", () => {
    const step = 1e-5;
    const at = [0.7, 1.2, 1.61, 2.4];
    for (const id of ["price", "yearFraction", "temperature"]) {
      const curve = termCurve(model, id, { at, derivative: true });
      const above = termCurve(model, id, { at: at.map((x) => x * Math.exp(step)) });
      const below = termCurve(model, id, { at: at.map((x) => x * Math.exp(-step)) });
      const numeric = above.estimate.map((value, k) => (value - below.estimate[k]) / (2 * step));
      expect(largestDifference(curve.derivative!.estimate, numeric)).toBeLessThan(1e-7);
      expect(Math.min(...curve.derivative!.standardError)).toBeGreaterThan(0);
    }
  });

  it("gives gradients that agree with differences of predictions", () => {
    const weights = Float64Array.from(data.price, (_, row) => Math.cos(row));
    const gradient = designTransposeTimes(model, data, weights);
    const total = predict(model, data).linearPredictor.reduce((sum, value, row) => sum + weights[row] * value, 0);
    const byGradient = gradient.reduce((sum, value, k) => sum + value * model.coefficients[k], 0);
    expect(byGradient).toBeCloseTo(total, 9);
    expect(designRows(model, data).count).toBe(data.price.length);
  });
});

describe("A normal model", () => {
  it("moves only its intercept when a constant is added to the response", () => {
    const model = fitModel(gaussianSpec, data);
    const moved = fitModel(gaussianSpec, { ...data, logUnits: data.logUnits.map((value) => value + 1000) });
    expect(moved.coefficients[0] - model.coefficients[0]).toBeCloseTo(1000, 9);
    expect(largestDifference(moved.coefficients.slice(1), model.coefficients.slice(1))).toBeLessThan(1e-7);
    expect(largestRelativeDifference(moved.covariance.filter(Boolean), model.covariance.filter(Boolean))).toBeLessThan(1e-5);
  });

  it("treats an offset as known part of the response", () => {
    const offset = data.price.map((value) => 2 * value);
    const model = fitModel({ ...gaussianSpec, offset: "offset" }, { ...data, offset });
    const less = fitModel(gaussianSpec, { ...data, logUnits: data.logUnits.map((value, row) => value - offset[row]) });
    expect(largestDifference(model.coefficients, less.coefficients)).toBeLessThan(1e-10);
  });
});

describe("A quasi-Poisson model", () => {
  it("multiplies its mean by the exposure in its offset", () => {
    const model = fitModel({ ...quasiPoissonSpec, offset: "logExposure" }, { ...data, logExposure: data.price.map((_, row) => Math.log(0.5 + (row % 5) / 10)) });
    const [half, whole] = [Math.log(0.5), 0].map((value) => predict(model, { ...data, logExposure: data.price.map(() => value) }));
    expect(largestRelativeDifference(whole.mean, half.mean.map((mean) => 2 * mean))).toBeLessThan(1e-12);
  });

  it("reproduces the total of the units it was fitted to", () => {
    const model = fitModel(quasiPoissonSpec, data);
    const total = (values: ArrayLike<number>) => Array.from(values).reduce((sum, value) => sum + value, 0);
    expect(total(model.fitted) / total(data.units)).toBeCloseTo(1, 7);
  });

  it("mixes the coefficients' uncertainty into a new row's interval", () => {
    const model = fitModel(quasiPoissonSpec, data);
    const certain = { ...model, covariance: new Float64Array(model.covariance.length) };
    const far = { price: [0.6], yearFraction: [0.5], temperature: [30], promotion: ["feature"] };
    const [mixed, alone] = [model, certain].map((one) => predict(one, far, { interval: "observation", level: 0.8 }));
    expect(mixed.upper[0]).toBeGreaterThan(alone.upper[0]);
    expect(mixed.mean[0]).toBe(alone.mean[0]);
  });
});

describe("Two starts", () => {
  it("never end above the criterion of a penalty given by hand", () => {
    for (const seed of [1, 2, 3, 4, 5, 6]) {
      const rows = salesRows(seed, 60);
      const spec: ModelSpec = { ...gaussianSpec, terms: [priceCurve, seasonCurve] };
      const { criterion } = fitModel(spec, rows);
      for (const logPenalty of [-8, -4, 0, 4, 8, 12]) {
        for (const other of [-8, -4, 0, 4, 8, 12]) {
          const byHand = fitModel({
            ...spec,
            terms: [
              { ...priceCurve, smoothness: { penalty: Math.exp(logPenalty) } },
              { ...seasonCurve, smoothness: { penalty: Math.exp(other) } },
            ],
          }, rows);
          expect(criterion).toBeLessThanOrEqual(byHand.criterion + 1e-9);
        }
      }
    }
  });
});
