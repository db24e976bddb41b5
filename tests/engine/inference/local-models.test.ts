import { fitModel, modelReport } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { coefficientTest } from "@shared/engine/inference/coefficient-test";
import { compareModels } from "@shared/engine/inference/compare-models";
import { fTail } from "@shared/engine/inference/weighted-chi-square";
import { influence } from "@shared/engine/predict/influence";
import { simultaneousQuantile } from "@shared/engine/predict/simultaneous-band";
import { describe, expect, it } from "vitest";
import { exampleModel, storeRows } from "./support/example-models";

const data = storeRows(3);
const promotion = { kind: "factor", column: "promotion", reference: "none" } as const;
const area = { kind: "factor", column: "area" } as const;
const local = { kind: "local-regression", column: "price", span: 0.6 } as const;
const fit = (terms: ModelSpec["terms"], family: ModelSpec["family"] = "gaussian"): FittedModel =>
  fitModel({ response: family === "gaussian" ? "y" : "units", family, terms }, data);

describe("A model with local regression", () => {
  const model = fit([local, promotion, area, { kind: "natural-spline", column: "temperature", df: 3 }]);
  const report = modelReport(model);

  it("has tests of its factors, by their coefficients, and says why other terms have none", () => {
    expect(report.terms.map(({ test }) => test !== null)).toEqual([false, true, true, false]);
    expect(report.terms.map(({ testReason }) => testReason)).toEqual([
      "local regression is tested by comparing models", null, null, "beside local regression only lines and factors are tested",
    ]);
    expect(report.terms.map(({ curveTest, concurvity }) => [curveTest, concurvity])).toEqual(Array(4).fill([null, null]));
  });

  it("tests a factor of two levels by its coefficient over its standard error, squared", () => {
    const { first } = model.terms[1];
    const index = first + (model.coefficientNames[first] === "promotion[feature]" ? 0 : 1);
    const t = model.coefficients[index] / Math.sqrt(model.covariance[(index * (index + 1)) / 2 + index]);
    const { test } = report.terms[1];
    expect(test!.statistic).toBeCloseTo(t ** 2, 8);
    expect(test!.pValue).toBeCloseTo(fTail(t ** 2, 1, 150 - model.edf), 10);
    expect(test).toMatchObject({ distribution: "F", referenceDegreesOfFreedom: 1, approximate: true });
    expect(report.terms[2].test).toMatchObject({ referenceDegreesOfFreedom: 2 });
  });

  it("has no AIC, for a reason of its own", () => {
    expect([report.aic, report.aicReason]).toEqual([null, "local regression has no restricted likelihood to correct by"]);
  });

  it("is compared with a line by F on plain degrees of freedom", () => {
    for (const family of ["gaussian", "quasi-poisson"] as const) {
      const [small, large] = [fit([{ kind: "linear", column: "price" }, promotion], family), fit([local, promotion], family)];
      const { statistic, degreesOfFreedom, pValue, aicDifference, verdict } = compareModels(small, large);
      expect(degreesOfFreedom).toBeCloseTo(large.edf - small.edf, 9);
      expect(statistic).toBeCloseTo((small.deviance - large.deviance) / degreesOfFreedom / large.dispersion, 9);
      expect(pValue).toBeLessThan(0.01);
      expect(aicDifference).toBe(null);
      expect(verdict).toMatch(/^A curve instead of a line in "price" is worth it: it explains more than chance would \(p (= 0\.00\d|below 0\.001)\)\.$/);
    }
  });

  it("has a simultaneous band, and no influence of rows", () => {
    const quantile = simultaneousQuantile(model, "price", { draws: 3000 });
    expect(quantile).toBeGreaterThan(2.1);
    expect(quantile).toBeLessThan(3.6);
    expect(() => influence(model, data)).toThrow("A model with local regression has no working model whose rows' influence could be told.");
  });
});

describe("A test by coefficients alone", () => {
  it("is the same as by information where there is some (1e-8)", () => {
    const model = exampleModel("curves and a factor");
    const { test } = modelReport(model).terms[2];
    const alone = coefficientTest(model, model.terms[2], test!.residualDegreesOfFreedom)!;
    expect(Math.abs(alone.statistic / alone.rank / test!.statistic - 1)).toBeLessThan(1e-8);
    expect(Math.abs(alone.pValue / test!.pValue - 1)).toBeLessThan(1e-7);
  });

  it("is of lines and factors only, and of no coefficient left out", () => {
    const curves = exampleModel("curves and a factor");
    expect(coefficientTest(curves, curves.terms[0], 100)).toBe(null);
    const twice = fit([{ kind: "linear", column: "price" }, { kind: "linear", column: "price", id: "again" }]);
    expect(coefficientTest(twice, twice.terms[1], 100)).toBe(null);
  });
});
