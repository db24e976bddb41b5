import { fitModel, predict, termCurve } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { gaussianSpec, quasiPoissonSpec, salesRows } from "./support/sales-rows";

/* Facts of the trade that every practitioner relies on: common practice, without a source. */

describe("A straight line's band (common practice)", () => {
  it("pinches to zero at the centre of the rows and opens on both sides", () => {
    const rows = salesRows(63);
    const model = fitModel(gaussianSpec, rows);
    const centre = rows.temperature.reduce((sum, value) => sum + value, 0) / rows.temperature.length;
    const { estimate, standardError, lower, upper } = termCurve(model, "temperature", { at: [-6, -3, -1, 0, 1, 3, 6].map((step) => centre + step) });
    expect(Math.abs(estimate[3])).toBeLessThan(1e-12);
    expect(upper[3] - lower[3]).toBeLessThan(1e-12);
    expect(standardError[4]).toBeGreaterThan(0);
    for (const step of [1, 3, 6]) {
      expect(termCurve(model, "temperature", { at: [centre + step] }).standardError[0] / standardError[4]).toBeCloseTo(step, 9);
      expect(termCurve(model, "temperature", { at: [centre - step] }).standardError[0] / standardError[4]).toBeCloseTo(step, 9);
    }
  });
});

describe("Contributions (common practice)", () => {
  it("of a factor are one constant per level", () => {
    const rows = salesRows(64);
    const { contributions } = predict(fitModel(quasiPoissonSpec, rows), rows);
    const byLevel = new Map<string, Set<number>>();
    rows.promotion.forEach((level, row) => byLevel.set(level, (byLevel.get(level) ?? new Set()).add(contributions.promotion[row])));
    expect(Array.from(byLevel.values(), (values) => values.size)).toEqual([1, 1, 1]);
    expect(new Set(contributions.promotion).size).toBe(3);
    expect(byLevel.get("none")).toEqual(new Set([0]));
  });

  it.each([["normal", gaussianSpec], ["quasi-Poisson", quasiPoissonSpec]] as const)("of curves and lines are centred over the rows: %s", (_, spec) => {
    const rows = salesRows(65);
    const { contributions } = predict(fitModel(spec, rows), rows);
    for (const id of ["price", "yearFraction", "temperature"]) {
      const values = Array.from(contributions[id]);
      const largest = Math.max(...values.map(Math.abs));
      expect(largest).toBeGreaterThan(1e-3);
      expect(Math.abs(values.reduce((sum, value) => sum + value, 0)) / values.length, id).toBeLessThan(1e-10 * largest);
    }
  });
});
