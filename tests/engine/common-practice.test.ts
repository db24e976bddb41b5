import { fitModel, predict, termCurve } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { seededNormal, seededUniform } from "./support/generator";
import { gaussianSpec, quasiPoissonSpec, salesRows } from "./support/sales-rows";

/* Facts of the trade that every practitioner relies on: common practice, without a source. */

const count = 150;

function smoothRows(seed: number, noise: number) {
  const [uniform, normal] = [seededUniform(seed), seededNormal(seed + 1)];
  const x = Array.from({ length: count }, () => 4 * uniform()).sort((left, right) => left - right);
  return { x, y: x.map((value) => Math.sin(1.2 * value) + 0.3 * value + noise * normal()) };
}

const localModel = (data: { x: number[]; y: number[] }, span: number, degree: 0 | 1 | 2) =>
  fitModel({ response: "y", family: "gaussian", terms: [{ kind: "local-regression", column: "x", span, degree }] }, data);

describe("A local regression and a smoothing spline (common practice)", () => {
  it.each([0.4, 0.6])("look alike at equal degrees of freedom, the largest gap under a tenth of the range: span %d", (span) => {
    const { x, y } = smoothRows(61, 0.1);
    const local = localModel({ x, y }, span, 1);
    const spline = fitModel({
      response: "y", family: "gaussian", terms: [{ kind: "smooth", column: "x", size: 20, smoothness: { df: local.edf - 1 } }],
    }, { x, y });
    expect(spline.edf).toBeCloseTo(local.edf, 3);
    const range = Math.max(...spline.fitted) - Math.min(...spline.fitted);
    const gaps = x.map((_, row) => Math.abs(spline.fitted[row] - local.fitted[row]));
    expect(Math.max(...gaps) / range).toBeLessThan(0.1);
  });
});

describe("A local line (common practice)", () => {
  it("has less bias at both ends of a falling curve than a local mean of the same span", () => {
    const { x } = smoothRows(62, 0);
    const truth = x.map((value) => 3 * Math.exp(-0.5 * value));
    const [mean, line] = ([0, 1] as const).map((degree) => localModel({ x, y: truth }, 0.4, degree).fitted);
    for (const end of [0, count - 1]) {
      expect(Math.abs(line[end] - truth[end])).toBeLessThan(0.5 * Math.abs(mean[end] - truth[end]));
    }
  });
});

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
