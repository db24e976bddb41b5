import { fitModel, modelReport } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { informationCriterion } from "@shared/engine/inference/information-criterion";
import { describe, expect, it } from "vitest";
import { committedReference } from "../support/reference-files";
import { exampleModel, partsOf, storeRows } from "./support/example-models";
import { rResults } from "./support/r-results";

const { data } = committedReference("tests-of-terms");
const promotion = { kind: "factor", column: "promotion", reference: "none" } as const;
const fit = (family: ModelSpec["family"], response: string, terms: ModelSpec["terms"]) => fitModel({ response, family, terms }, data);
const criterionOf = (model: FittedModel) => informationCriterion(model, partsOf(model));

describe("AIC without penalties is R's AIC of lm and glm (R 4.2.2; 1e-6)", () => {
  it.each([
    { family: "gaussian", response: "logUnits", terms: [{ kind: "linear", column: "price" }], k: 0, degrees: 3 },
    { family: "gaussian", response: "logUnits", terms: [{ kind: "linear", column: "price" }, promotion], k: 1, degrees: 5 },
    { family: "binomial", response: "bought", terms: [{ kind: "linear", column: "price" }], k: 2, degrees: 2 },
    { family: "binomial", response: "bought", terms: [{ kind: "linear", column: "price" }, promotion], k: 3, degrees: 4 },
  ] as const)("$family, $degrees parameters", ({ family, response, terms, k, degrees }) => {
    const { aic, degreesOfFreedom, reason } = criterionOf(fit(family, response, [...terms]));
    expect(Math.abs((aic ?? Number.NaN) - rResults.anova.aic[k])).toBeLessThan(1e-6);
    expect(degreesOfFreedom).toBeCloseTo(degrees, 9);
    expect(reason).toBe(null);
  });
});

describe("Conditional AIC agrees with AIC(gam(method = \"REML\")) of mgcv 1.8-41 (reference.R)", () => {
  const { stores } = committedReference("groups");
  const { byLevel, byNumber, surfaces: [surface] } = committedReference("varying-curves");
  const gaussian = (terms: ModelSpec["terms"]): ModelSpec => ({ response: "y", family: "gaussian", terms });
  const levels = { kind: "random-effect", column: "store" } as const;
  // The correction's second part depends on the coordinates its Cholesky factor is taken in. Curves have the reference's;
  // surfaces and groups (first here, last there) have their own, and differ by some hundredths of a degree of freedom.
  it.each([
    { name: "a curve times a number", model: gaussian([{ kind: "smooth", column: "x", by: "amount", size: 9 }, { kind: "linear", column: "other" }]), rows: byNumber.data, expected: rResults.terms.byNumber, within: 1e-4 },
    { name: "curves per level", model: gaussian([{ kind: "factor", column: "area" }, { kind: "smooth", column: "x", by: "area", size: 8 }]), rows: byLevel.data, expected: rResults.terms.byLevel, within: 5e-3 },
    { name: "levels of stores", model: gaussian([{ kind: "smooth", column: "x", size: 8 }, { kind: "linear", column: "depth" }, levels]), rows: stores.data, expected: rResults.terms.levels, within: 0.05 },
    { name: "levels and slopes of stores", model: gaussian([{ kind: "smooth", column: "x", size: 8 }, { kind: "linear", column: "depth" }, levels, { ...levels, by: "depth", id: "slopes" }]), rows: stores.data, expected: rResults.terms.slopes, within: 0.05 },
    { name: "a surface", model: gaussian([{ kind: "smooth", column: "x", size: 8 }, { kind: "smooth", column: "z", size: 8 }, { kind: "tensor-product", columns: ["x", "z"] }]), rows: surface.data, expected: rResults.terms.surface, within: 0.05 },
  ])("$name: within $within", ({ model, rows, expected, within }) => {
    const { aic, degreesOfFreedom } = criterionOf(fitModel(model, rows));
    expect(Math.abs((aic ?? Number.NaN) - expected.aic)).toBeLessThan(within);
    expect(Math.abs((degreesOfFreedom ?? Number.NaN) - expected.degrees)).toBeLessThan(within);
  });
});

describe("AIC", () => {
  it("counts the dispersion where it is estimated, and theta", () => {
    const rows = storeRows(3);
    const terms: ModelSpec["terms"] = [{ kind: "linear", column: "price" }];
    for (const [family, response, parameters] of [["gaussian", "y", 3], ["log-gaussian", "units", 3], ["negative-binomial", "units", 3]] as const) {
      const whole = { ...rows, units: rows.units.map((value) => value + 1) };
      expect(criterionOf(fitModel({ response, family, terms }, whole)).degreesOfFreedom, family).toBeCloseTo(parameters, 8);
    }
  });

  it("prefers the model that the rows were made from", () => {
    const aicOf = (terms: ModelSpec["terms"]) => modelReport(exampleModel("curves and a factor", { terms })).aic ?? Number.NaN;
    const full: ModelSpec["terms"] = [{ kind: "smooth", column: "price" }, promotion, { kind: "linear", column: "temperature" }, { kind: "random-walk", column: "week" }];
    expect(aicOf(full)).toBeLessThan(aicOf(full.slice(0, 3)) - 10);
    expect(aicOf(full)).toBeLessThan(aicOf(full.slice(1)) - 10);
  });

  it("is null with its reason where there is none", () => {
    const quasi = modelReport(fit("quasi-poisson", "units", [promotion]));
    expect([quasi.aic, quasi.aicReason]).toEqual([null, "quasi families have no likelihood"]);
    const price: ModelSpec["terms"] = [{ kind: "linear", column: "price" }];
    const perfect = modelReport(fitModel({ response: "y", family: "gaussian", terms: price }, { price: [1, 2, 3, 4, 5], y: [2, 4, 6, 8, 10] }));
    expect([perfect.aic, perfect.aicReason]).toEqual([null, "the model reproduces the response exactly, and its likelihood has no bound"]);
    const model = exampleModel("lines and a factor");
    expect(informationCriterion(model, null)).toEqual({ aic: null, degreesOfFreedom: null, reason: "the penalised system is singular to rounding" });
    const local: FittedModel = { ...model, spec: { ...model.spec, terms: [{ kind: "local-regression", column: "price", span: 0.5 }] } };
    expect(informationCriterion(local, null).reason).toBe("local regression has no restricted likelihood to correct by");
  });

  it("says where its degrees of freedom are only bounded", () => {
    const weeks = Array.from({ length: 320 }, (_, row) => row + 1);
    const walk = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "random-walk", column: "week" }] }, { week: weeks, y: weeks.map((week) => Math.sin(week / 20) + ((week * 7) % 5) / 10) });
    const report = modelReport(walk);
    expect(report.aicReason).toBe("with so many coefficients its degrees of freedom are taken at their upper bound");
    expect(Number.isFinite(report.aic)).toBe(true);
    expect(report.terms[0]).toMatchObject({ test: null, testReason: "it has 319 coefficients, and tests are made of up to 150", concurvity: null });
  });
});
