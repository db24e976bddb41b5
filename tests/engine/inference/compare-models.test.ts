import { EngineError, fitModel } from "@shared/engine";
import type { FittedModel, ModelData, ModelSpec } from "@shared/engine";
import { compareModels } from "@shared/engine/inference/compare-models";
import { fTail, weightedChiSquareTail } from "@shared/engine/inference/weighted-chi-square";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";
import { committedReference } from "../support/reference-files";
import { storeRows } from "./support/example-models";
import { rResults } from "./support/r-results";

const { data, nested } = committedReference("tests-of-terms");
const line = { kind: "linear", column: "price" } as const;
const curve = { kind: "smooth", column: "price" } as const;
const promotion = { kind: "factor", column: "promotion", reference: "none" } as const;
const fit = (terms: ModelSpec["terms"], change: Partial<ModelSpec> = {}, rows: ModelData = data): FittedModel =>
  fitModel({ response: "logUnits", family: "gaussian", terms, ...change }, rows);
const relative = (value: number | null, expected: number) => Math.abs((value ?? Number.NaN) / expected - 1);

describe("Comparisons of nested models agree with R's anova (R 4.2.2; 1e-8)", () => {
  it("F of lm: a factor more", () => {
    const comparison = compareModels(fit([line]), fit([line, promotion]));
    expect(relative(comparison.statistic, rResults.anova.line.statistic)).toBeLessThan(1e-8);
    expect(relative(comparison.pValue, rResults.anova.line.pValue)).toBeLessThan(1e-8);
    expect(comparison).toMatchObject({ distribution: "F", residualDegreesOfFreedom: 236 });
    expect(comparison.degreesOfFreedom).toBeCloseTo(2, 9);
    expect(comparison.aicDifference).toBeCloseTo(rResults.anova.aic[1] - rResults.anova.aic[0], 6);
  });

  it("F of lm: a natural spline in place of a line", () => {
    const temperature = { kind: "linear", column: "temperature" } as const;
    const comparison = compareModels(fit([temperature, promotion]), fit([{ kind: "natural-spline", column: "temperature", df: nested.df }, promotion]));
    expect(relative(comparison.statistic, nested.statistic)).toBeLessThan(1e-8);
    expect(relative(comparison.pValue, nested.pValue)).toBeLessThan(1e-8);
    expect([comparison.degreesOfFreedom, comparison.residualDegreesOfFreedom].map((value) => Math.round(value ?? 0))).toEqual([nested.degreesOfFreedom, nested.residualDegreesOfFreedom]);
  });

  it("chi-square of a binomial glm", () => {
    const change = { response: "bought", family: "binomial" } as const;
    const comparison = compareModels(fit([line], change), fit([line, promotion], change));
    expect(relative(comparison.statistic, rResults.anova.shares.statistic)).toBeLessThan(1e-7);
    expect(relative(comparison.pValue, rResults.anova.shares.pValue)).toBeLessThan(1e-7);
    expect(comparison).toMatchObject({ distribution: "chi-square", residualDegreesOfFreedom: null });
  });
});

describe("A comparison", () => {
  it("of curves is F of the deviances over what the larger has more of degrees of freedom", () => {
    const [small, large] = [fit([line]), fit([curve, promotion])];
    const { statistic, degreesOfFreedom, residualDegreesOfFreedom, pValue } = compareModels(small, large);
    expect(degreesOfFreedom).toBeGreaterThan(2 + large.terms[0].edf - 1);
    expect(residualDegreesOfFreedom).toBeCloseTo(240 - large.edf, 9);
    expect(statistic).toBeCloseTo((small.deviance - large.deviance) / degreesOfFreedom / large.dispersion, 9);
    expect(relative(pValue, fTail(statistic!, degreesOfFreedom, residualDegreesOfFreedom!))).toBeLessThan(1e-9);
  });

  it("of negative binomial models is by likelihoods, each at its own theta", () => {
    const change = { response: "units", family: "negative-binomial" } as const;
    const [small, large] = [fit([line], change), fit([line, promotion], change)];
    const { statistic, pValue } = compareModels(small, large);
    expect(small.theta).not.toBe(large.theta);
    expect(statistic).toBeCloseTo(2 * (large.logLikelihood! - small.logLikelihood!), 9);
    expect(relative(pValue, weightedChiSquareTail({ weights: [1], degrees: [2] }, statistic!))).toBeLessThan(1e-6);
  });

  it("judges nothing below half a degree of freedom", () => {
    const straight = { price: data.price, y: data.price.map((price, row) => 2 - price + 0.01 * (row % 2)) };
    const change = { response: "y" };
    const comparison = compareModels(fit([line], change, straight), fit([{ ...curve, smoothness: { df: 1.2 } }], change, straight));
    expect(comparison.degreesOfFreedom).toBeLessThan(0.5);
    expect(comparison).toMatchObject({ statistic: null, pValue: null });
    expect(comparison.verdict).toBe(
      `The two models differ by less than half a degree of freedom (${comparison.degreesOfFreedom.toFixed(2)}), too little to compare them this way: read the larger model's test of a curve against a line instead.`,
    );
    expect(compareModels(fit([curve]), fit([curve])).pValue).toBe(null);
  });

  it("has p = 1 where the larger model fits no better", () => {
    const large = { ...fit([line, promotion]), deviance: fit([line]).deviance + 1 };
    expect(compareModels(fit([line]), large).pValue).toBeCloseTo(1, 9);
  });

  it("is by plain degrees of freedom where a model has none of the others, as with local regression", () => {
    const [small, large] = [fit([line]), { ...fit([curve]), information: null }];
    const { degreesOfFreedom, statistic } = compareModels(small, large);
    expect(degreesOfFreedom).toBeCloseTo(large.edf - 2, 9);
    expect(statistic).toBeCloseTo((small.deviance - large.deviance) / degreesOfFreedom / large.dispersion, 9);
  });

  it("has no AIC difference for quasi families", () => {
    const change = { response: "units", family: "quasi-poisson" } as const;
    expect(compareModels(fit([line], change), fit([line, promotion], change)).aicDifference).toBe(null);
  });
});

describe("The verdict", () => {
  const normal = seededNormal(3);
  const rows = { ...storeRows(3), noise: storeRows(3).y.map(() => normal()) };
  const apart = rows.y.map((value, row) => value + (rows.store[row] === "S2" ? 4 * (rows.price[row] - 1.5) : 0));
  const on = (terms: ModelSpec["terms"], response = "y") => fit(terms, { response }, { ...rows, apart });
  const area = { kind: "factor", column: "area" } as const;
  const store = { kind: "random-effect", column: "store" } as const;
  const worth = " is worth it: it explains more than chance would (p below 0.001).";
  it.each<{ smaller: ModelSpec["terms"]; larger: ModelSpec["terms"]; response?: string; verdict: string }>([
    { smaller: [area], larger: [area, promotion], verdict: '"promotion" is worth it: it explains more than chance would (p = 0.004).' },
    { smaller: [promotion], larger: [promotion, curve], verdict: `The curve "price"${worth}` },
    { smaller: [area, curve], larger: [area, { ...curve, by: "area" }], verdict: `A curve of "price" for each "area"${worth}` },
    { response: "apart", smaller: [curve, store], larger: [curve, { kind: "factor-smooth", column: "price", group: "store" }], verdict: `A curve of "price" for each "store"${worth}` },
    { smaller: [{ ...curve, size: 5, smoothness: { penalty: 1e-6 } }], larger: [{ ...curve, size: 9, smoothness: { penalty: 1e-6 } }, { kind: "random-walk", column: "week" }], verdict: `A finer curve of "price" together with the moving level "week"${worth}` },
    { smaller: [promotion], larger: [promotion, area, { ...curve, by: "area" }], verdict: `"area" together with a curve of "price" for each "area"${worth}` },
    { smaller: [promotion], larger: [promotion, store], verdict: 'a level for each "store"' },
    { smaller: [line], larger: [line, { ...store, by: "price", smoothness: { penalty: 1 } }], verdict: 'a slope in "price" for each "store"' },
    { smaller: [{ ...curve, shape: "decreasing", smoothness: { penalty: 100 } }], larger: [{ ...curve, smoothness: { penalty: 1e-6 } }], verdict: 'a curve of "price" of any shape explains more than chance would (p = 0.' },
    { smaller: [line], larger: [line, { kind: "tensor-product", columns: ["price", "temperature"], smoothness: { df: 2 } }], verdict: 'the interaction of "price" and "temperature"' },
  ])("says what is added: $verdict", ({ smaller, larger, response, verdict }) => {
    const comparison = compareModels(on(smaller, response), on(larger, response));
    if (verdict.endsWith(").")) expect(comparison.verdict).toBe(verdict);
    else expect(comparison.verdict).toContain(verdict);
  });

  it("says that there is no evidence, with the p-value", () => {
    const comparison = compareModels(on([area]), on([area, { kind: "linear", column: "noise" }]));
    expect(comparison.verdict).toBe(`No evidence that "noise" explains more than chance would (p = ${comparison.pValue!.toFixed(3)}): the smaller model will do.`);
    expect(compareModels(on([{ kind: "linear", column: "noise" }]), on([{ kind: "smooth", column: "noise", smoothness: { df: 3 } }])).verdict)
      .toMatch(/^No evidence that a curve instead of a line in "noise" explains more than chance would \(p = 0\.\d{3}\): the smaller model will do\.$/);
  });

  it("warns of a fit that did not come to rest, and of one that leaves nothing to judge by", () => {
    const restless = { ...on([area, promotion]), converged: false };
    expect(compareModels(on([area]), restless).verdict).toBe(`"promotion" is worth it: it explains more than chance would (p = 0.004). One of the two fits did not come to rest, so take this with care.`);
    const exact = { x: [1, 2, 3, 4, 5], z: [1, 0, 1, 1, 0], y: [3, 4, 7, 9, 10] };
    const [small, large] = [[{ kind: "linear", column: "x" }], [{ kind: "linear", column: "x" }, { kind: "linear", column: "z" }]] as const;
    const comparison = compareModels(fit([...small], { response: "y" }, exact), fit([...large], { response: "y" }, exact));
    expect(comparison).toMatchObject({ pValue: null, aicDifference: null, verdict: "The larger model reproduces the response exactly, so nothing is left to judge it by." });
  });
});

describe("Models that cannot be compared are refused, saying why", () => {
  const other = { ...data, logUnits: data.logUnits.map((value, row) => value + (row === 7 ? 1 : 0)) };
  it.each<{ larger: FittedModel; message: string }>([
    { larger: fit([line, promotion], { response: "units" }), message: 'the smaller model\'s response is "logUnits", the larger\'s "units"; they must be the same.' },
    { larger: fit([line, promotion], { weights: "units" }, { ...data, units: data.units.map((value) => value + 1) }), message: 'the smaller model\'s weights is none, the larger\'s "units"; they must be the same.' },
    { larger: fit([line], {}, { price: data.price.slice(1), logUnits: data.logUnits.slice(1) }), message: "the smaller model was fitted to 240 rows, the larger to 239; they must be the same rows." },
    { larger: fit([line, promotion], {}, other), message: "the two models' null deviances differ, so they were fitted to other responses, weights or offsets." },
    { larger: fit([promotion]), message: 'term "price" of the smaller model is not a special case of any term of the larger.' },
  ])("$message", ({ larger, message }) => {
    const attempt = () => compareModels(fit([line]), larger);
    expect(attempt).toThrow(EngineError);
    expect(attempt).toThrow(`These models cannot be compared: ${message}`);
  });
});
