import { fitModel, modelReport } from "@shared/engine";
import type { ModelSpec } from "@shared/engine";
import { compareModels } from "@shared/engine/inference/compare-models";
import { weightedChiSquareTail } from "@shared/engine/inference/weighted-chi-square";
import { describe, expect, it } from "vitest";
import { seededNormal, seededUniform } from "../support/generator";

/** Weekly rows of many stores, a price curve whose slope differs by store. */
function chainRows(stores: number, weeks: number) {
  const uniform = seededUniform(61);
  const normal = seededNormal(62);
  const store = Array.from({ length: stores * weeks }, (_, row) => `S${row % stores}`);
  const price = store.map(() => 1 + uniform());
  const deal = store.map(() => (uniform() < 0.2 ? "deal" : "none"));
  const y = price.map((value, row) => 3 - 2 * value + ((row % stores) / stores) * (value - 1.5) + (deal[row] === "deal" ? 0.4 : 0) + 0.3 * normal());
  return { store, price, deal, y };
}

const price = { kind: "smooth", column: "price", size: 8 } as const;
const deal = { kind: "factor", column: "deal", reference: "none" } as const;
const spec = (terms: ModelSpec["terms"]): ModelSpec => ({ response: "y", family: "gaussian", terms });

describe("A chain of 60 stores", () => {
  const rows = chainRows(60, 40);
  const curves = fitModel(spec([price, { kind: "factor-smooth", column: "price", group: "store" }, deal]), rows);
  const report = modelReport(curves);

  it("has tests of its shared terms, and says why its 360 coefficients of stores have none", () => {
    expect(report.terms.map(({ test }) => test === null)).toEqual([false, true, false]);
    expect(report.terms[1].testReason).toBe("it has 360 coefficients, and tests are made of up to 150");
    expect(report.terms[0].test!.pValue).toBeLessThan(1e-10);
    expect(report.terms[2].test!.pValue).toBeLessThan(1e-10);
  });

  it("has an AIC that tells curves per store from none, and a comparison that says so", () => {
    const without = fitModel(spec([price, deal]), rows);
    const plain = modelReport(without);
    expect(report.aicReason).toBe(null);
    expect(report.aic!).toBeLessThan(plain.aic! - 100);
    const { verdict, aicDifference } = compareModels(without, curves);
    expect(aicDifference).toBeCloseTo(report.aic! - plain.aic!, 9);
    expect(verdict).toBe('A curve of "price" for each "store" is worth it: it explains more than chance would (p below 0.001).');
  });

  it("has levels of stores tested, where there are no more than 150", () => {
    const levels = modelReport(fitModel(spec([price, deal, { kind: "random-effect", column: "store" }]), rows));
    expect(levels.terms[2].testReason).toBe(null);
    expect(levels.terms[2].test!.referenceDegreesOfFreedom).toBe(59);
  });

  it("shares little between price and deal, and what stores deviate by is no part of the chain's concurvity", () => {
    for (const { id, concurvity } of report.terms) expect(concurvity, id).toBeLessThan(0.2);
    expect(report.warnings.filter(({ code }) => code === "concurvity")).toEqual([]);
  });

  it("is reported within two seconds", () => {
    const before = performance.now();
    modelReport(curves);
    expect(performance.now() - before).toBeLessThan(2000);
  });
});

describe("Mixtures of chi-squares far from the ordinary", () => {
  it.each([
    { name: "150 weights over twelve powers of ten", weights: Array.from({ length: 150 }, (_, k) => 10 ** (-k / 12.5)), degrees: 1, x: 20 },
    { name: "a million degrees of freedom", weights: [1, -0.999], degrees: 1e6, x: 2000 },
    { name: "a hundredth of a degree of freedom", weights: [1], degrees: 0.01, x: 1e-8 },
    { name: "nearly cancelling weights", weights: [1, -1 + 1e-9], degrees: 3, x: 1e-6 },
    { name: "huge and tiny weights of both signs", weights: [1e9, 1e-9, -1e9, -1e-9], degrees: 1, x: 5 },
  ])("$name: a probability, in bounded time", ({ weights, degrees, x }) => {
    const before = performance.now();
    const tail = weightedChiSquareTail({ weights, degrees: weights.map(() => degrees) }, x);
    expect(tail).toBeGreaterThanOrEqual(0);
    expect(tail).toBeLessThanOrEqual(1);
    expect(performance.now() - before).toBeLessThan(500);
    const above = weightedChiSquareTail({ weights, degrees: weights.map(() => degrees) }, 2 * x);
    expect(above).toBeLessThanOrEqual(tail + 1e-9);
  });

  it("of one weight a hundredth of a degree of freedom wide are gamma's: P(chi2(d) > x) is 1 - (x/2)^(d/2) / gamma(1 + d/2) near 0", () => {
    // Abramowitz & Stegun (1964), 6.5.29, first term; gamma(1.005) = 0.9971385 (to 1e-6).
    const tail = weightedChiSquareTail({ weights: [1], degrees: [0.01] }, 1e-8);
    expect(Math.abs(tail - (1 - 0.5e-8 ** 0.005 / 0.9971385))).toBeLessThan(1e-6);
  });

  it("of a million degrees of freedom are normal: mean 1,000, variance about 4e6 (1e-3)", () => {
    const tail = weightedChiSquareTail({ weights: [1, -0.999], degrees: [1e6, 1e6] }, 1000 + 1.959964 * Math.sqrt(2e6 * (1 + 0.999 ** 2)));
    expect(Math.abs(tail - 0.025)).toBeLessThan(1e-3);
  });
});

describe("Comparing a line with a curve where the line is true", () => {
  it("finds the curve worth it about one time in twenty at given degrees of freedom: 300 draws, within four standard errors", () => {
    const normal = seededNormal(70);
    const x = Array.from({ length: 90 }, (_, row) => ((row * 29) % 90) / 30);
    let found = 0;
    for (let turn = 0; turn < 300; turn++) {
      const data = { x, y: x.map((value) => 1 + 0.5 * value + normal()) };
      const line = fitModel(spec([{ kind: "linear", column: "x" }]), data);
      const curve = fitModel(spec([{ kind: "smooth", column: "x", smoothness: { df: 4 } }]), data);
      found += compareModels(line, curve).pValue! < 0.05 ? 1 : 0;
    }
    expect(Math.abs(found / 300 - 0.05)).toBeLessThan(4 * Math.sqrt((0.05 * 0.95) / 300));
  });
});
