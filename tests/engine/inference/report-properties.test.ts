import { EngineError, fitModel, modelReport } from "@shared/engine";
import type { FittedModel, ModelReport, ModelSpec, TermSpec } from "@shared/engine";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";
import { exampleModel, exampleNames, exampleTerms, storeRows } from "./support/example-models";

const data = storeRows(3);
const testsOf = ({ terms }: ModelReport) => terms.flatMap(({ id, test, curveTest }) => [[`${id}`, test] as const, [`${id} (curve)`, curveTest] as const]);

/** Statistics, ranks, p-values and shares of two reports, term by term; terms at their penalty's limit are rounding. */
function expectSameFindings(one: ModelReport, other: ModelReport, within: number): void {
  testsOf(one).forEach(([id, test], k) => {
    const [, twin] = testsOf(other)[k];
    if (test === null || twin === null || test.referenceDegreesOfFreedom === 0 || test.statistic < 1e-3) return;
    expect(Math.abs(twin.statistic / test.statistic - 1), id).toBeLessThan(within);
    expect(Math.abs(twin.referenceDegreesOfFreedom - test.referenceDegreesOfFreedom), id).toBeLessThan(within * 10);
    expect(Math.abs(Math.log(Math.max(twin.pValue, 1e-200)) - Math.log(Math.max(test.pValue, 1e-200))), id).toBeLessThan(within * 1000);
  });
  one.terms.forEach(({ id, concurvity, edf }, k) => {
    if (concurvity !== null && edf > 1e-3) expect(Math.abs((other.terms[k].concurvity ?? Number.NaN) - concurvity), id).toBeLessThan(within * 10);
  });
}

const withData = (name: string, change: Record<string, number[] | string[]>, spec: Partial<ModelSpec> = {}): FittedModel =>
  fitModel({ response: "y", family: "gaussian", terms: exampleTerms[name], ...spec }, { ...data, ...change });

describe.each(exampleNames)("What the report finds in a model with %s", (name) => {
  const report = modelReport(exampleModel(name));

  it("does not depend on the response's unit or level (1e-5)", () => {
    const other = modelReport(withData(name, { y: data.y.map((value) => 250 * value + 1000) }));
    expectSameFindings(report, other, 1e-5);
    // The density of 250 y is that of y over 250.
    expect((other.aic ?? Number.NaN) - (report.aic ?? Number.NaN)).toBeCloseTo(2 * 150 * Math.log(250), 3);
  });

  it("does not depend on the order of rows (1e-5)", () => {
    const order = data.y.map((_, row) => (row * 41 + 7) % data.y.length);
    const shuffled = Object.fromEntries(Object.entries(data).map(([column, values]) => [column, order.map((row) => values[row])])) as Record<string, number[] | string[]>;
    const other = modelReport(fitModel({ response: "y", family: "gaussian", terms: exampleTerms[name] }, shuffled));
    expectSameFindings(report, other, 1e-5);
    expect(other.aic).toBeCloseTo(report.aic ?? Number.NaN, 4);
  });

  it("does not depend on the weights' unit (1e-5)", () => {
    const weighted = modelReport(withData(name, {}, { weights: "weight" }));
    const other = modelReport(withData(name, { weight: data.weight.map((value) => 8 * value) }, { weights: "weight" }));
    expectSameFindings(weighted, other, 1e-5);
    expect(other.aic).toBeCloseTo(weighted.aic ?? Number.NaN, 3);
  });

  it("leaves the model as it was, and says the same again", () => {
    const model = exampleModel(name);
    const kept = structuredClone(model);
    expect(modelReport(model)).toEqual(modelReport(model));
    expect(model).toEqual(kept);
  });
});

describe("Tests of nothing at all", () => {
  const lot = data.y.map((_, row) => `lot ${row % 8}`);
  const season = data.y.map((_, row) => ((row * 17) % 60) / 60);

  it.each<{ term: TermSpec; most: number }>([
    // Penalties chosen by the data: half of the time they go to the limit, and p is then near 1, so fewer than 5 % are below 0.05.
    { term: { kind: "random-effect", column: "lot" }, most: 0.05 },
    { term: { kind: "cyclic-smooth", column: "season", period: [0, 1] }, most: 0.05 },
    // Chosen smoothness is taken for given, so p is somewhat too small: up to twice as often (Wood 2013, section 4).
    { term: { kind: "smooth", column: "price" }, most: 0.1 },
    { term: { kind: "linear", column: "price" }, most: 0.05 },
  ])("reject it about as seldom as they say: $term.kind, 300 draws, three standard errors", ({ term, most }) => {
    const normal = seededNormal(19);
    let rejected = 0;
    for (let turn = 0; turn < 300; turn++) {
      const model = fitModel({ response: "y", family: "gaussian", terms: [term] }, { ...data, lot, season, y: data.y.map(() => normal()) });
      rejected += modelReport(model).terms[0].test!.pValue < 0.05 ? 1 : 0;
    }
    expect(rejected / 300).toBeLessThan(most + 3 * Math.sqrt((most * (1 - most)) / 300));
  });

  it.each<{ term: TermSpec; effect: (row: number) => number }>([
    { term: { kind: "random-effect", column: "lot" }, effect: (row) => (row % 8) / 4 },
    { term: { kind: "cyclic-smooth", column: "season", period: [0, 1] }, effect: (row) => Math.sin(2 * Math.PI * season[row]) },
    { term: { kind: "smooth", column: "price" }, effect: (row) => Math.cos(4 * data.price[row]) },
  ])("reject it where there is something: $term.kind, 40 of 40 draws", ({ term, effect }) => {
    const normal = seededNormal(20);
    for (let turn = 0; turn < 40; turn++) {
      const model = fitModel({ response: "y", family: "gaussian", terms: [term] }, { ...data, lot, season, y: data.y.map((_, row) => effect(row) + normal()) });
      expect(modelReport(model).terms[0].test!.pValue).toBeLessThan(0.05);
    }
  });
});

describe("Any model", () => {
  const terms: TermSpec[] = [
    { kind: "linear", column: "price" }, { kind: "smooth", column: "price", id: "curve", size: 6 }, { kind: "smooth", column: "temperature", log: false },
    { kind: "cyclic-smooth", column: "week", period: [0.5, 15.5], size: 6 }, { kind: "factor", column: "promotion" }, { kind: "natural-spline", column: "temperature", df: 3, id: "natural" },
    { kind: "random-effect", column: "store" }, { kind: "random-walk", column: "week", id: "walk" }, { kind: "random-effect", column: "area", id: "areas" },
    { kind: "smooth", column: "temperature", by: "price", size: 5, id: "varying" }, { kind: "tensor-product", columns: ["price", "temperature"], sizes: [4, 4] },
  ];
  const families = ["gaussian", "log-gaussian", "quasi-poisson", "negative-binomial"] as const;

  it("ends in a report of finite numbers, or null with a reason: 120 random specifications and sets of rows", () => {
    fc.assert(fc.property(
      fc.uniqueArray(fc.constantFrom(...terms), { minLength: 1, maxLength: 5 }), fc.constantFrom(...families), fc.integer({ min: 1, max: 1000 }), fc.integer({ min: 40, max: 110 }),
      (chosen, family, seed, count) => {
        const rows = storeRows(seed, count);
        const response = family === "gaussian" ? "y" : "units";
        const whole = { ...rows, units: rows.units.map((value) => value + 1) };
        let model: FittedModel;
        try {
          model = fitModel({ response, family, terms: chosen }, whole);
        } catch (error) {
          expect(error).toBeInstanceOf(EngineError);
          return;
        }
        const { aic, aicReason, terms: reports } = modelReport(model);
        expect(aic === null ? aicReason : Number.isFinite(aic)).toBeTruthy();
        for (const { test, testReason, curveTest, concurvity } of reports) {
          expect(test === null ? testReason : testReason === null).toBeTruthy();
          for (const one of [test, curveTest]) {
            if (one === null) continue;
            expect(one.pValue >= 0 && one.pValue <= 1).toBe(true);
            expect(Number.isFinite(one.statistic) && one.statistic >= 0 && Number.isFinite(one.referenceDegreesOfFreedom)).toBe(true);
          }
          expect(concurvity === null || (concurvity >= 0 && concurvity <= 1)).toBe(true);
        }
      },
    ), { seed: 11, numRuns: 120 });
  }, 60_000);
});
