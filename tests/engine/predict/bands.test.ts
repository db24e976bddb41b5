import { covarianceQuadratic, designTransposeTimes, fitModel, predict, termCurve } from "@shared/engine";
import type { BandKind, FittedModel } from "@shared/engine";
import { withCentredLevels } from "@shared/engine/inference/level-centring";
import { averagedModel } from "@shared/engine/predict/averaged-model";
import { bandModel } from "@shared/engine/predict/band-model";
import { correctedModel } from "@shared/engine/predict/corrected-model";
import { sharedCount } from "@shared/engine/predict/model-covariance";
import { coefficientMatrix, sharedCoefficients } from "@shared/engine/predict/shared-coefficients";
import { simultaneousBand, simultaneousQuantile } from "@shared/engine/predict/simultaneous-band";
import { describe, expect, it } from "vitest";
import { exampleModel, exampleNames, partsOf, storeRows } from "../inference/support/example-models";
import { largestDifference } from "../support/measures";

const rows = storeRows(3);
const errorsOf = (model: FittedModel, id: string, band: BandKind, group?: string) => termCurve(model, id, { points: 40, band, group }).standardError;

describe.each(exampleNames)("Coefficients of coordinates: %s", (name) => {
  const model = exampleModel(name);

  it("are the model's (1e-9 of the largest)", () => {
    const { coordinates } = withCentredLevels(model, model.information!);
    const own = sharedCoefficients(model, coordinates);
    const expected = model.coefficients.subarray(0, sharedCount(model));
    expect(largestDifference(own, expected)).toBeLessThan(1e-9 * Math.max(...expected.map(Math.abs)));
  });

  it("have the model's covariance (1e-8 of the largest)", () => {
    const own = coefficientMatrix(model, partsOf(model).posterior.covariance).map((value) => value * model.dispersion);
    expect(largestDifference(own, model.covariance)).toBeLessThan(1e-8 * Math.max(...model.covariance.map(Math.abs)));
  });
});

describe("The band with the mean's error", () => {
  it.each([
    ["curves and a factor", "price", undefined], ["curves and a factor", "week", undefined], ["lines and a factor", "temperature", undefined],
    ["a natural spline", "price", undefined], ["a surface", "temperature", undefined], ["a moving level", "week", undefined], ["a curve per level", "price:area", "coast"],
  ] as const)("is that of the predictor of average rows (1e-9): %s, %s", (name, id, group) => {
    const model = exampleModel(name);
    const term = model.terms.find((one) => one.id === id)!;
    const { x, standardError } = termCurve(model, id, { points: 9, band: "with-mean", group });
    // The mean of all rows' designs, the curve's own part replaced by its row at x.
    const mean = designTransposeTimes(model, rows, new Float64Array(rows.price.length).fill(1 / rows.price.length));
    const factor = model.terms.find(({ kind, columns }) => group !== undefined && kind === "factor" && columns[0] === "area");
    if (factor?.basis.kind === "factor") factor.basis.levels.forEach((level, k) => { mean[factor.first + k] = Number(level === group); });
    Array.from(x, Number).forEach((value, k) => {
      const one = { price: [1.5], temperature: [12], week: [1], promotion: ["none"], area: [group ?? "coast"], [term.columns[0]]: [value] };
      const gradient = mean.slice();
      gradient.set(designTransposeTimes(model, one, Float64Array.of(1)).subarray(term.first, term.first + term.count), term.first);
      expect(Math.abs(standardError[k] / Math.sqrt(covarianceQuadratic(model, gradient, gradient)) - 1)).toBeLessThan(1e-9);
    });
  });

  it("does not pinch where a line crosses its mean, and leaves the estimate and slopes alone", () => {
    const model = exampleModel("lines and a factor");
    const centre = rows.price.reduce((sum, value) => sum + value, 0) / rows.price.length;
    const at = (band: BandKind) => termCurve(model, "price", { at: [1.1, centre], derivative: true, band });
    expect(at("pointwise").standardError[1]).toBeLessThan(1e-12);
    expect(at("with-mean").standardError[1]).toBeGreaterThan(0.01);
    expect(at("with-mean").estimate).toEqual(at("pointwise").estimate);
    expect(at("with-mean").derivative).toEqual(at("pointwise").derivative);
  });

  it("adds nothing to what is not centred: a factor's levels, curves times a number, groups", () => {
    for (const [name, id, group] of [["curves and a factor", "promotion", undefined], ["a curve times a number", "price:temperature", undefined], ["a curve per store", "price:store", "S2"]] as const) {
      expect(errorsOf(exampleModel(name), id, "with-mean", group)).toEqual(errorsOf(exampleModel(name), id, "pointwise", group));
    }
  });
});

const penalised = exampleNames.filter((name) => !["lines and a factor", "a natural spline"].includes(name));

describe.each(penalised)("Bands with the penalties' error: %s", (name) => {
  const model = exampleModel(name);

  it("are nowhere narrower by the expansion, and wider somewhere", () => {
    const corrected = correctedModel(model);
    const [before, after] = [predict(model, rows).standardError, predict(corrected, rows).standardError];
    after.forEach((value, row) => expect(value).toBeGreaterThanOrEqual(before[row] * (1 - 1e-9)));
    expect(Math.max(...after.map((value, row) => value / before[row]))).toBeGreaterThan(1.002);
    expect(corrected.coefficients).toBe(model.coefficients);
  });

  it("stay a covariance: every predicted variance is finite and not negative, and estimates stay", () => {
    const averaged = averagedModel(model);
    predict(averaged, rows).standardError.forEach((value) => expect(value).toBeGreaterThan(0));
    expect(predict(averaged, rows).linearPredictor).toEqual(predict(model, rows).linearPredictor);
  });
});

describe("Bands with the penalties' error", () => {
  it("are the pointwise ones where penalties are given, held to degrees of freedom, or none", () => {
    const given = (smoothness: { df: number } | { penalty: number }) =>
      exampleModel("curves and a factor", { terms: [{ kind: "smooth", column: "price", smoothness }, { kind: "factor", column: "promotion" }] });
    for (const model of [given({ df: 4 }), given({ penalty: 2 }), exampleModel("a natural spline"), exampleModel("lines and a factor")]) {
      expect(errorsOf(model, "price", "averaged")).toEqual(errorsOf(model, "price", "pointwise"));
      expect(errorsOf(model, "price", "corrected")).toEqual(errorsOf(model, "price", "with-mean"));
    }
  });

  it("are the pointwise ones with local regression, which has no penalties, and for perfect fits", () => {
    const local = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "local-regression", column: "price", span: 0.6 }] }, rows);
    const line = Array.from({ length: 40 }, (_, row) => row);
    const perfect = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "smooth", column: "x" }] }, { x: line, y: line });
    for (const [model, id] of [[local, "price"], [perfect, "x"]] as const) {
      expect(errorsOf(model, id, "averaged").every(Number.isFinite)).toBe(true);
      expect(averagedModel(local)).toBe(local);
      expect(correctedModel(local)).toBe(local);
    }
  });

  it("of all kinds are drawn at once by the model they are made of", () => {
    const model = exampleModel("curves and a factor");
    expect(bandModel(model)).toBe(model);
    expect(bandModel(model, "with-mean")).toBe(model);
    expect(termCurve(bandModel(model, "averaged"), "price")).toEqual(termCurve(model, "price", { band: "averaged" }));
  });

  it("hold whole curves too: the quantile is of the same band's deviations", () => {
    const model = exampleModel("curves and a factor");
    for (const band of ["with-mean", "corrected", "averaged"] as const) {
      const whole = simultaneousBand(model, "price", { points: 20, draws: 2000, band });
      const one = termCurve(model, "price", { points: 20, band });
      expect(whole.standardError).toEqual(one.standardError);
      const times = whole.upper.map((value, k) => (value - whole.estimate[k]) / whole.standardError[k]);
      times.forEach((value) => expect(value).toBeCloseTo(times[0], 9));
      expect(times[0]).toBeGreaterThan(2.1);
      expect(times[0]).not.toBe(simultaneousQuantile(model, "price", { points: 20, draws: 2000 }));
    }
    // A line on its level strays in two ways, not in one.
    expect(simultaneousQuantile(exampleModel("lines and a factor"), "price", { draws: 2000, band: "with-mean" })).toBeGreaterThan(2.1);
  });

  it("refuse another word", () => {
    expect(() => termCurve(exampleModel("curves and a factor"), "price", { band: "wide" as BandKind }))
      .toThrow('band is "wide"; it must be one of "pointwise", "with-mean", "corrected", "averaged".');
  });
});
