import { fitModel, predict } from "@shared/engine";
import type { FittedModel } from "@shared/engine";
import { logarithmicMean, netGain, planMargins } from "@shared/planning";
import { describe, expect, it } from "vitest";
import { seededUniform } from "./support/generator";
import { quasiPoissonSpec, salesRows } from "./support/sales-rows";

/*
 * Published results that engine and planning must give together. Others stand beside their subject: NIST's Longley values and
 * Hildreth & Lu's demand in reference-agreement, calendar years in tests/calendar/week-numbers, GS1's check digit in
 * tests/demo/gtin, break-even lift in tests/planning/money.
 */

/** Demand of constant elasticity -3, without noise. */
function constantElasticity(family: "log-gaussian" | "quasi-poisson"): FittedModel {
  const uniform = seededUniform(20240401);
  const price = Array.from({ length: 60 }, () => 1 + 2 * uniform());
  const units = price.map((value) => 400 * value ** -3);
  return fitModel({ response: "units", family, terms: [{ kind: "linear", column: "price", log: true }] }, { price, units });
}

/** Gain over selling at twice the unit cost, by the money functions that plans use. */
function gainAt(model: FittedModel, price: number, unitCost: number): number {
  const regularPrice = 2 * unitCost;
  const { mean } = predict(model, { price: [price, regularPrice] });
  const cell = { planUnits: mean[0], baseUnits: mean[1], price, regularPrice, unitCost, taxRate: 0, fundingPerUnit: 0 };
  return netGain(planMargins([cell]));
}

/** The largest value's place, by golden sections (Kiefer 1953). */
function highest(value: (at: number) => number, from: number, to: number): number {
  const ratio = (Math.sqrt(5) - 1) / 2;
  let [left, right] = [from, to];
  for (let turn = 0; turn < 60; turn++) {
    const [inner, outer] = [right - ratio * (right - left), left + ratio * (right - left)];
    if (value(inner) < value(outer)) left = inner;
    else right = outer;
  }
  return (left + right) / 2;
}

describe("Lerner's rule (1934): price over unit cost is elasticity / (elasticity + 1)", () => {
  it.each(["log-gaussian", "quasi-poisson"] as const)("puts the best price at 1.5 x unit cost where elasticity is -3: %s", (family) => {
    const model = constantElasticity(family);
    expect(model.coefficients[1]).toBeCloseTo(-3, 7);
    for (const unitCost of [0.8, 1.2, 1.7]) {
      // A maximum is flat: its place is known to half the digits of its value.
      expect(highest((price) => gainAt(model, price, unitCost), unitCost, 4 * unitCost) / unitCost).toBeCloseTo(1.5, 6);
    }
  });
});

describe("LMDI-I (Ang, Energy Policy 33 (2005) 867-871)", () => {
  it("divides the difference of two predictions among all terms without remainder", () => {
    const rows = salesRows(5);
    const model = fitModel(quasiPoissonSpec, rows);
    const { mean, contributions } = predict(model, rows);
    for (let row = 1; row < mean.length; row++) {
      const weight = logarithmicMean(mean[row], mean[row - 1]);
      const parts = Object.values(contributions).map((values) => weight * (values[row] - values[row - 1]));
      const total = parts.reduce((sum, part) => sum + part, 0);
      expect(Math.abs(total - (mean[row] - mean[row - 1]))).toBeLessThan(1e-9);
    }
  });
});
