import { fitModel, predict } from "@shared/engine";
import type { Family, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { largestDifference } from "../support/measures";
import { salesRows } from "../support/sales-rows";

const rows = salesRows(11, 140);
const data = { ...rows, share: rows.logUnits.map((value) => Math.min(0.95, Math.max(0.05, value / 6))), trials: rows.units.map(() => 20) };
const local: TermSpec = { kind: "local-regression", column: "price", log: true, span: 0.5 };
const season = { kind: "cyclic-smooth", column: "yearFraction", period: [0, 1] as [number, number] } satisfies TermSpec;
const temperature = { kind: "smooth", column: "temperature" } satisfies TermSpec;
const factor: TermSpec = { kind: "factor", column: "promotion", reference: "none" };
const gaussian = (terms: TermSpec[]): ModelSpec => ({ response: "logUnits", family: "gaussian", terms });

/** The response less what some terms contribute to a fitted model. */
function lessContributions(spec: ModelSpec, ids: readonly string[]): number[] {
  const { contributions } = predict(fitModel(spec, data), data);
  return rows.logUnits.map((value, row) => value - ids.reduce((sum, id) => sum + contributions[id][row], 0));
}

describe("Terms beside a local regression", () => {
  const spec = gaussian([local, season, temperature, factor]);
  const model = fitModel(spec, data);
  const { contributions } = predict(model, data);

  it("have the penalties and curves that restricted likelihood gives them for the response less the local curve", () => {
    const left = lessContributions(spec, ["price"]);
    const others = fitModel(gaussian([season, temperature, factor]), { ...data, logUnits: left });
    expect(model.converged).toBe(true);
    for (const id of ["yearFraction", "temperature"]) {
      const own = model.terms.find((term) => term.id === id)?.penalties ?? [];
      const reference = others.terms.find((term) => term.id === id)?.penalties ?? [];
      // Turns end where a log penalty moves by less than 1e-6, the search where it would gain less than 1e-7.
      expect(Math.abs(Math.log(own[0] / reference[0]))).toBeLessThan(1e-3);
      expect(largestDifference(contributions[id], predict(others, data).contributions[id])).toBeLessThan(1e-5);
    }
    expect(Math.abs(model.criterion - others.criterion)).toBeLessThan(1e-6);
  });

  it("leave to the local regression a response whose own local fit is its curve, to 1e-9", () => {
    const left = lessContributions(spec, ["yearFraction", "temperature", "promotion"]);
    const alone = fitModel(gaussian([local]), { ...data, logUnits: left });
    expect(largestDifference(contributions.price, predict(alone, data).contributions.price)).toBeLessThan(1e-9);
  });

  it("have the degrees of freedom asked for as their trace in the joint fit, to 1e-6", () => {
    const asked = fitModel(gaussian([local, { ...season, smoothness: { df: 3.5 } }, { ...temperature, smoothness: { df: 4 } }]), data);
    expect(asked.converged).toBe(true);
    expect(Math.abs(asked.terms[1].edf - 3.5)).toBeLessThan(1e-6);
    expect(Math.abs(asked.terms[2].edf - 4)).toBeLessThan(1e-6);
    const auto = fitModel(gaussian([local, season, { ...temperature, smoothness: { df: 4 } }]), data);
    expect(auto.converged).toBe(true);
    expect(Math.abs(auto.terms[2].edf - 4)).toBeLessThan(1e-6);
    expect(auto.terms[1].penalties[0]).toBeGreaterThan(0);
  });

  it("keep the penalty given, and need one solve then", () => {
    const given = fitModel(gaussian([local, { ...season, smoothness: { penalty: 7 } }]), data);
    expect(given.terms[1].penalties[0]).toBeCloseTo(7, 12);
    expect(given.iterations).toBe(1);
    const left = lessContributions(gaussian([local, { ...season, smoothness: { penalty: 7 } }]), ["price"]);
    const alone = fitModel(gaussian([{ ...season, smoothness: { penalty: 7 } }]), { ...data, logUnits: left });
    const own = predict(given, data).contributions.yearFraction;
    expect(largestDifference(own, predict(alone, data).contributions.yearFraction)).toBeLessThan(1e-10);
  });
});

describe("Every kind of shared term stands beside a local regression, and is fitted to what the curve leaves", () => {
  const week = rows.price.map((_, row) => row % 70);
  const more = { ...data, week, amount: rows.units.map((units) => (units % 7) - 3) };
  const given = { smoothness: { penalty: 3 } };
  const kinds: [string, TermSpec[]][] = [
    ["a curve per level", [factor, { kind: "smooth", column: "temperature", by: "promotion", size: 6, ...given, id: "own" }]],
    ["a curve times a number", [{ kind: "smooth", column: "temperature", by: "amount", size: 6, ...given, id: "own" }]],
    ["a surface", [{ kind: "tensor-product", columns: ["temperature", "amount"], ...given, id: "own" }]],
    ["a slowly moving level", [{ kind: "random-walk", column: "week", ...given, id: "own" }]],
    ["a regression spline", [{ kind: "natural-spline", column: "temperature", df: 3, id: "own" }]],
    ["a circle, a line and a factor", [{ ...season, ...given, id: "own" }, factor, { kind: "linear", column: "amount" }]],
  ];

  it.each(kinds)("%s, to 1e-9", (_name, terms) => {
    const model = fitModel(gaussian([...terms, local]), more);
    const { contributions, standardError } = predict(model, more);
    const left = more.logUnits.map((value, row) => value - contributions.price[row]);
    const alone = predict(fitModel(gaussian(terms), { ...more, logUnits: left }), more);
    expect(model.converged).toBe(true);
    expect(largestDifference(contributions.own, alone.contributions.own)).toBeLessThan(1e-9);
    expect(standardError.every((error) => error > 0)).toBe(true);
    const total = model.terms.reduce((sum, { edf }) => sum + edf, 1);
    expect(model.edf).toBeCloseTo(total, 9);
  });
});

describe("Every family takes local regressions", () => {
  const specs: { family: Family; response: string; weights?: string }[] = [
    { family: "gaussian", response: "logUnits" }, { family: "log-gaussian", response: "shifted" }, { family: "quasi-poisson", response: "units" },
    { family: "negative-binomial", response: "units" }, { family: "binomial", response: "share", weights: "trials" },
  ];
  const all = { ...data, shifted: rows.units.map((units) => units + 1) };

  it.each(specs)("$family comes to rest, near the same model with a smooth in its place", ({ family, response, weights }) => {
    const of = (price: TermSpec): ModelSpec => ({ response, family, ...(weights === undefined ? {} : { weights }), terms: [price, season, factor] });
    const model = fitModel(of(local), all);
    const smooth = fitModel(of({ kind: "smooth", column: "price", log: true, smoothness: { df: model.terms[0].edf } }), all);
    expect(model.converged).toBe(true);
    expect(model.warnings).toEqual([]);
    const [own, other] = [model, smooth].map((fit) => predict(fit, all).linearPredictor);
    const range = Math.max(...other) - Math.min(...other);
    // Common practice: at equal degrees of freedom smoothers look alike, within a tenth of the range.
    expect(largestDifference(own, other) / range).toBeLessThan(0.1);
    expect(model.theta === null).toBe(family !== "negative-binomial");
    if (family === "negative-binomial" || family === "binomial") expect(model.dispersion).toBe(1);
    else expect(model.dispersion / smooth.dispersion).toBeCloseTo(1, 1);
  });

  it("stops where it is told, and says so", () => {
    const model = fitModel({ response: "units", family: "quasi-poisson", terms: [local, season] }, all, { maxIterations: 2 });
    expect(model.converged).toBe(false);
    expect(model.iterations).toBe(2);
    expect(model.warnings.map(({ code }) => code)).toContain("not-converged");
  });
});
