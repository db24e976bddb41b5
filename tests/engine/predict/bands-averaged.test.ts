import { fitModel, predict, termCurve } from "@shared/engine";
import type { Family, FittedModel, ModelSpec } from "@shared/engine";
import { averagedModel } from "@shared/engine/predict/averaged-model";
import { correctedModel } from "@shared/engine/predict/corrected-model";
import { averageOver } from "@shared/engine/predict/penalty-average";
import { coefficientMatrix } from "@shared/engine/predict/shared-coefficients";
import { CholeskyDecomposition, inverse, Matrix } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { denseOf, penaltyMatrix } from "../inference/support/dense";
import { exampleModel, partsOf } from "../inference/support/example-models";
import { seededNormal } from "../support/generator";
import { largestDifference } from "../support/measures";
import { simulatedSales, simulatedSpec } from "../support/simulated-sales";

const logDeterminant = (matrix: Matrix): number =>
  2 * new CholeskyDecomposition(matrix).lowerTriangularMatrix.diagonal().reduce((sum, value) => sum + Math.log(value), 0);

/** The covariance averaged by the whole system's criterion on a fine grid (steps of 0.1), penalty by penalty, without regard to cost. */
function slowlyAveraged(model: FittedModel, scale: "known" | "unknown"): Float64Array {
  const { information, posterior } = partsOf(model);
  const dense = denseOf(information, posterior);
  const estimate = Matrix.columnVector(dense.estimate);
  const system = dense.information.clone().add(penaltyMatrix(dense));
  const right = system.mmul(estimate);
  const covariance = inverse(system);
  const residual = model.dispersion * (model.rowCount - model.edf) + estimate.transpose().mmul(penaltyMatrix(dense)).mmul(estimate).get(0, 0);
  const averaged = covariance.clone().mul(model.dispersion);
  posterior.penalties.forEach((_penalty, j) => {
    const points = Array.from({ length: 500 }, (_, k) => {
      const move = -25 + k / 10;
      const penalties = dense.penalties.map((values, other) => (other === j ? values.map((value) => value * Math.exp(move)) : values));
      const sums = penaltyMatrix({ ...dense, penalties });
      const moved = dense.information.clone().add(sums);
      const spread = inverse(moved);
      const b = spread.mmul(right);
      const squares = residual + right.transpose().mmul(estimate).get(0, 0) - right.transpose().mmul(b).get(0, 0);
      const fit = scale === "known" ? squares : (model.rowCount - information.unpenalised) * Math.log(squares);
      const penalised = sums.diagonal().reduce((sum, value) => sum + (value > 0 ? Math.log(value) : 0), 0);
      const gap = b.sub(estimate);
      return { criterion: (fit + logDeterminant(moved) - penalised + move) / 2, value: spread.sub(covariance).mul(model.dispersion).add(gap.mmul(gap.transpose())) };
    }).filter(({ criterion }) => Number.isFinite(criterion));
    const least = Math.min(...points.map(({ criterion }) => criterion));
    const weights = points.map(({ criterion }) => Math.exp(least - criterion));
    const total = weights.reduce((sum, weight) => sum + weight, 0);
    points.forEach(({ value }, k) => averaged.add(value.mul(weights[k] / total)));
  });
  return coefficientMatrix(model, Float64Array.from(averaged.to1DArray()));
}

describe("The covariance averaged over penalties", () => {
  const curves: ModelSpec["terms"] = [{ kind: "smooth", column: "price", size: 8 }, { kind: "cyclic-smooth", column: "week", period: [0.5, 15.5], size: 8 }, { kind: "factor", column: "promotion" }];
  it.each([
    ["gaussian", "y", "unknown"], ["quasi-poisson", "units", "unknown"], ["negative-binomial", "units", "known"],
  ] as const)("is that of the whole system on a fine grid (2e-3 of the largest entry, for the grids' ends): %s", (family, response, scale) => {
    const model = exampleModel("", { family, response, terms: curves });
    const slow = slowlyAveraged(model, scale);
    const { covariance } = averagedModel(model);
    const largest = Math.max(...slow.map(Math.abs));
    expect(largestDifference(covariance, slow)).toBeLessThan(2e-3 * largest);
    expect(largestDifference(covariance, model.covariance)).toBeGreaterThan(0.02 * largest);
  });

  it("is so where two penalties meet in a surface", () => {
    const model = exampleModel("a surface");
    const slow = slowlyAveraged(model, "unknown");
    expect(largestDifference(averagedModel(model).covariance, slow)).toBeLessThan(2e-3 * Math.max(...slow.map(Math.abs)));
  });

  it("is near the expansion's where rows leave little doubt: curves' errors within 10 % at 1,872 rows", () => {
    const { data } = simulatedSales("gaussian", { seed: 4, count: 1872, shape: "threshold" });
    const model = fitModel(simulatedSpec("gaussian"), data);
    const [averaged, corrected] = [averagedModel(model), correctedModel(model)].map((one) => predict(one, data).standardError);
    averaged.forEach((value, row) => expect(Math.abs(value / corrected[row] - 1)).toBeLessThan(0.1));
  });
});

describe("A curve that was smoothed to a line", () => {
  const normal = seededNormal(12);
  const x = Array.from({ length: 60 }, (_, row) => row / 59);
  const model = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "smooth", column: "x" }] }, { x, y: x.map((value) => 2 * value + 0.5 * normal()) });

  it("has a band of bent curves too once averaged; the expansion about the limit adds nothing", () => {
    expect(model.terms[0].edf).toBeLessThan(1.001);
    const at = [0.05, 0.25, 0.5, 0.75, 0.95];
    const before = termCurve(model, "x", { at }).standardError;
    const corrected = termCurve(correctedModel(model), "x", { at }).standardError;
    const averaged = termCurve(model, "x", { at, band: "averaged" }).standardError;
    expect(largestDifference(corrected, before)).toBeLessThan(0.01 * Math.max(...before));
    averaged.forEach((value, k) => expect(value).toBeGreaterThan(before[k]));
    // In the middle the line is all but known; a bend there is not.
    expect(averaged[2]).toBeGreaterThan(5 * before[2]);
  });
});

describe("The average over one penalty", () => {
  const setting = { multiplier: 4, dispersion: 2, residual: 100, degreesOfFreedom: 50 };
  it("has no moves where estimates are zero, and shrinks as information grows", () => {
    const of = (information: number) => averageOver({ information: new Float64Array(6).fill(information), estimates: new Float64Array(6), others: new Float64Array(6) }, setting);
    const few = of(1);
    for (let row = 0; row < 6; row++) for (let k = 0; k < 6; k++) if (k !== row) expect(few[row * 6 + k]).toBe(0);
    expect(few[0] + setting.dispersion / 5).toBeGreaterThan(0);
    expect(of(1000)[0] + setting.dispersion / 1004).toBeLessThan(few[0] + setting.dispersion / 5);
  });

  it("is finite for coordinates without information, and for many", () => {
    for (const width of [2, 300]) {
      for (const value of [0, 1e-8, 1e8]) {
        const out = averageOver({ information: new Float64Array(width).fill(value), estimates: new Float64Array(width).fill(0.1), others: new Float64Array(width) }, setting);
        expect(out.every(Number.isFinite), `${width} of ${value}`).toBe(true);
      }
    }
  });
});

describe("Every family", () => {
  it.each(["gaussian", "log-gaussian", "quasi-poisson", "negative-binomial", "binomial"] satisfies Family[])("has averaged bands that are wider on the whole: %s", (family) => {
    const { data } = simulatedSales(family, { seed: 9, count: 156, shape: "gentle" });
    const model = fitModel(simulatedSpec(family), data);
    const mean = (band: "pointwise" | "averaged") => termCurve(model, "price", { band }).standardError.reduce((sum, value) => sum + value, 0);
    expect(mean("averaged")).toBeGreaterThan(1.05 * mean("pointwise"));
  });

  it("is not there for groups' own penalties: only what they share is averaged", () => {
    const model = exampleModel("levels and slopes of stores");
    expect(averagedModel(model)).toBe(model);
  });
});
