import { fitModel, modelReport } from "@shared/engine";
import type { FittedModel, ModelReport, ModelSpec, TermTest } from "@shared/engine";
import { inverse, Matrix } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { committedReference } from "../support/reference-files";
import { exampleModel } from "./support/example-models";
import { rResults } from "./support/r-results";

type Terms = ModelReport["terms"];
const tested = (terms: Terms, id: string): TermTest => {
  const test = terms.find((term) => term.id === id)?.test;
  if (!test) throw new Error(`There is no test of ${id}.`);
  return test;
};
const relative = (value: number, expected: number) => Math.abs(value / expected - 1);
const gaussian = (terms: ModelSpec["terms"], response = "y"): ModelSpec => ({ response, family: "gaussian", terms });

describe("Tests of terms agree with summary.gam of mgcv 1.8-41 (reference.R)", () => {
  const { stores } = committedReference("groups");
  const { byLevel, byNumber, surfaces: [surface] } = committedReference("varying-curves");

  it("of a curve, a line and levels of groups: statistic to 1e-6", () => {
    const { terms } = modelReport(fitModel(gaussian([
      { kind: "smooth", column: "x", size: 8 }, { kind: "linear", column: "depth" }, { kind: "random-effect", column: "store" },
    ]), stores.data));
    const { smooth, parametric } = rResults.terms.levels;
    [tested(terms, "x"), tested(terms, "store")].forEach((test, k) => {
      expect(relative(test.statistic, (smooth.statistic as number[])[k])).toBeLessThan(1e-6);
      expect(relative(test.referenceDegreesOfFreedom, (smooth.degrees as number[])[k])).toBeLessThan(1e-6);
      expect(test.pValue).toBeLessThan(1e-30);
    });
    expect(relative(tested(terms, "depth").statistic, parametric.statistic as number)).toBeLessThan(1e-6);
    expect(relative(tested(terms, "depth").pValue, parametric.pValue as number)).toBeLessThan(1e-5);
  });

  it("of a curve beside two random effects; of these only the rank, since the reference weighs the data by their covariance and not its inverse", () => {
    const { terms } = modelReport(fitModel(gaussian([
      { kind: "smooth", column: "x", size: 8 }, { kind: "linear", column: "depth" },
      { kind: "random-effect", column: "store" }, { kind: "random-effect", column: "store", by: "depth", id: "slopes" },
    ]), stores.data));
    const { smooth, parametric } = rResults.terms.slopes;
    expect(relative(tested(terms, "x").statistic, (smooth.statistic as number[])[0])).toBeLessThan(1e-6);
    expect(relative(tested(terms, "depth").pValue, parametric.pValue as number)).toBeLessThan(1e-5);
    expect(["store", "slopes"].map((id) => tested(terms, id).referenceDegreesOfFreedom)).toEqual((smooth.degrees as number[]).slice(1));
  });

  it("of a curve times a number, and of a surface with its main effects: statistic to 1e-4", () => {
    const varying = modelReport(fitModel(gaussian([{ kind: "smooth", column: "x", by: "amount", size: 9 }, { kind: "linear", column: "other" }]), byNumber.data)).terms;
    expect(relative(tested(varying, "x:amount").statistic, rResults.terms.byNumber.smooth.statistic as number)).toBeLessThan(1e-6);
    expect(relative(tested(varying, "other").statistic, rResults.terms.byNumber.parametric.statistic as number)).toBeLessThan(1e-6);
    const { terms } = modelReport(fitModel(gaussian([
      { kind: "smooth", column: "x", size: 8 }, { kind: "smooth", column: "z", size: 8 }, { kind: "tensor-product", columns: ["x", "z"] },
    ]), surface.data));
    const { smooth } = rResults.terms.surface;
    ["x", "z", "x:z"].forEach((id, k) => {
      expect(relative(tested(terms, id).statistic, (smooth.statistic as number[])[k]), id).toBeLessThan(1e-4);
      expect(relative(tested(terms, id).referenceDegreesOfFreedom, (smooth.degrees as number[])[k]), id).toBeLessThan(1e-4);
    });
  });

  it("of curves per level: together the ranks of the reference's one by one", () => {
    const { terms } = modelReport(fitModel(gaussian([{ kind: "factor", column: "area" }, { kind: "smooth", column: "x", by: "area", size: 8 }]), byLevel.data));
    const together = (rResults.terms.byLevel.smooth.degrees as number[]).reduce((sum, value) => sum + value, 0);
    expect(tested(terms, "x:area").referenceDegreesOfFreedom).toBeCloseTo(together, 5);
  });
});

describe("The 11 products of store 2, against mgcv 1.8-41", () => {
  const terms: ModelSpec["terms"] = [
    { kind: "smooth", column: "price", log: true, size: 8 }, { kind: "cyclic-smooth", column: "woy", period: [0.5, 52.5], size: 12 },
    { kind: "factor", column: "deal" }, { kind: "linear", column: "feat" },
  ];
  const series = committedReference("additive-models").series.map((one, k) => ({ ...one, expected: rResults.series[k] }));

  // Statistics of curves to 1e-5. A season whose penalty is at its limit has a statistic of about 1e-8, with the penalty's
  // own scale: there p alone is compared. p to a thousandth: the reference rounds the residual degrees of freedom.
  it.each(series)("$name", ({ data, expected }) => {
    const report = modelReport(fitModel(gaussian(terms, "logmove"), data));
    const [price, season] = [tested(report.terms, "price"), tested(report.terms, "woy")];
    const { statistic, degrees, pValue } = expected.smooth as Record<string, number[]>;
    expect(relative(price.statistic, statistic[0])).toBeLessThan(1e-5);
    expect(relative(price.referenceDegreesOfFreedom, degrees[0])).toBeLessThan(1e-5);
    if (statistic[1] > 1e-6) expect(relative(season.statistic, statistic[1])).toBeLessThan(1e-5);
    expect(season.referenceDegreesOfFreedom).toBe(degrees[1]);
    expect(relative(season.pValue, pValue[1])).toBeLessThan(5e-3);
    ["deal", "feat"].forEach((id, k) => {
      expect(relative(tested(report.terms, id).statistic, (expected.parametric.statistic as number[])[k])).toBeLessThan(1e-5);
      expect(relative(tested(report.terms, id).pValue, (expected.parametric.pValue as number[])[k])).toBeLessThan(1e-5);
    });
    expect(Math.abs((report.aic ?? Number.NaN) - expected.aic)).toBeLessThan(1e-4);
  });
});

/** b' V^-1 b / q from what a fitted model shows of itself. */
function waldOf(model: FittedModel, id: string, leftOut: number | null): number {
  const term = model.terms.find((one) => one.id === id)!;
  const indices = Array.from({ length: term.count }, (_, k) => term.first + k).filter((_index, k) => k !== leftOut);
  const packed = (row: number, column: number) => model.covariance[row >= column ? (row * (row + 1)) / 2 + column : (column * (column + 1)) / 2 + row];
  const covariance = new Matrix(indices.map((row) => indices.map((column) => packed(row, column))));
  const estimate = Matrix.columnVector(indices.map((index) => model.coefficients[index]));
  return estimate.transpose().mmul(inverse(covariance)).mmul(estimate).get(0, 0) / indices.length;
}

describe("Wald's test of a term under no penalty", () => {
  const { data } = committedReference("tests-of-terms");
  const promotion = { kind: "factor", column: "promotion", reference: "none" } as const;

  it("is drop1's F of lm, exactly, and says that it is exact (R 4.2.2; 1e-9)", () => {
    const { terms } = modelReport(fitModel(gaussian([{ kind: "linear", column: "price" }, promotion], "logUnits"), data));
    const { statistic, pValue } = rResults.anova.perTerm;
    terms.forEach(({ test }, k) => {
      expect(relative(test!.statistic, statistic[k])).toBeLessThan(1e-9);
      expect(relative(test!.pValue, pValue[k])).toBeLessThan(1e-8);
      expect(test).toMatchObject({ approximate: false, distribution: "F", residualDegreesOfFreedom: 236 });
    });
  });

  it("is of the coefficients as the model shows them, whatever coordinates they were fitted in", () => {
    const perLevel = exampleModel("a curve per level");
    const [area, curve] = modelReport(perLevel).terms;
    const basis = perLevel.terms[0].basis;
    if (basis.kind !== "factor") throw new Error("The first term is the factor.");
    expect(relative(area.test!.statistic, waldOf(perLevel, "area", basis.levels.indexOf(basis.reference)))).toBeLessThan(1e-7);
    expect(area.test!.approximate).toBe(true);
    expect(curve.test!.pValue).toBeLessThan(1e-6);
    const other = exampleModel("a curve per level", { terms: perLevel.spec.terms.map((term) => (term.kind === "factor" ? { ...term, reference: "plain" } : term)) });
    expect(relative(modelReport(other).terms[0].test!.statistic, area.test!.statistic)).toBeLessThan(1e-6);
  });

  it("refers a known dispersion to a chi-square", () => {
    const { terms } = modelReport(fitModel({ response: "bought", family: "binomial", terms: [promotion] }, data));
    expect(terms[0].test).toMatchObject({ distribution: "chi-square", residualDegreesOfFreedom: null, referenceDegreesOfFreedom: 2, approximate: true });
  });
});

it("A test whose statistic has no finite value is none, with the reason", () => {
  const { stores } = committedReference("groups");
  const model = fitModel(gaussian([{ kind: "linear", column: "depth" }, { kind: "factor", column: "store" }]), stores.data);
  const [runAway] = modelReport({ ...model, dispersion: Infinity, deviance: Infinity }).terms;
  expect(runAway.test === null || Number.isFinite(runAway.test.pValue)).toBe(true);
  const [none] = modelReport({ ...model, information: { ...model.information!, coordinates: model.information!.coordinates.map(() => NaN) } }).terms;
  expect(none.test).toBeNull();
  expect(none.testReason).toBe("the fit ran off, and its statistic has no finite value");
});
