import { fitModel, modelReport } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { fTail } from "@shared/engine/inference/weighted-chi-square";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";
import { exampleModel, storeRows } from "./support/example-models";

const data = storeRows(3);
const testOf = (model: FittedModel, id: string) => {
  const test = modelReport(model).terms.find((term) => term.id === id)?.test;
  if (!test) throw new Error(`There is no test of ${id}.`);
  return test;
};
const relative = (value: number, expected: number) => Math.abs(value / expected - 1);

describe("Levels of groups", () => {
  const groups = 9;
  const each = 7;
  const normal = seededNormal(40);
  const levels = Array.from({ length: groups }, () => 0.5 * normal());
  const group = Array.from({ length: groups * each }, (_, row) => `group ${row % groups}`);
  const y = group.map((_, row) => levels[row % groups] + normal());

  it("of one size have a p-value in closed form, whatever the penalty: F of the squares between groups over the dispersion", () => {
    // With m rows a group and penalty l: b = m / (m + l) d, C^-1 = m + l, the mixture's weights m / (m + l); so T over its weight is sum m d^2.
    const overall = y.reduce((sum, value) => sum + value, 0) / y.length;
    const between = levels.reduce((sum, _level, k) => {
      const own = y.filter((_, row) => row % groups === k).reduce((total, value) => total + value, 0) / each;
      return sum + each * (own - overall) ** 2;
    }, 0);
    for (const smoothness of ["auto", { penalty: 2 }, { penalty: 40 }] as const) {
      const model = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "random-effect", column: "group", smoothness }] }, { group, y });
      const test = testOf(model, "group");
      expect(test.referenceDegreesOfFreedom).toBe(groups - 1);
      const expected = fTail(between / (groups - 1) / model.dispersion, groups - 1, y.length - model.edf);
      expect(relative(test.pValue, expected), JSON.stringify(smoothness)).toBeLessThan(1e-8);
    }
  });

  it("are tested alike where they are eliminated group by group and where they stand among the shared coordinates", () => {
    const store: ModelSpec["terms"][number] = { kind: "random-effect", column: "store", smoothness: { penalty: 3 } };
    const price: ModelSpec["terms"][number] = { kind: "smooth", column: "price", smoothness: { df: 3 } };
    // A finer grouping that does nothing takes the elimination over.
    const idle: ModelSpec["terms"][number] = { kind: "random-effect", column: "lot", smoothness: { penalty: 1e12 } };
    const rows = { ...data, lot: data.y.map((_, row) => `lot ${row % 30}`) };
    const fit = (terms: ModelSpec["terms"]) => fitModel({ response: "y", family: "gaussian", terms }, rows);
    const [alone, beside] = [fit([price, store]), fit([price, store, idle])];
    expect(alone.terms[1].layout.groupFirst).toBe(0);
    expect(beside.terms[1].layout.groupFirst).toBe(null);
    for (const id of ["price", "store"]) {
      const [one, other] = [testOf(alone, id), testOf(beside, id)];
      expect(relative(other.statistic, one.statistic), id).toBeLessThan(1e-6);
      expect(relative(other.pValue, one.pValue), id).toBeLessThan(1e-5);
    }
    expect(modelReport(beside).terms[1].concurvity).toBeCloseTo(modelReport(alone).terms[1].concurvity ?? Number.NaN, 6);
  });

  it("treat other groups' levels as random: with these in the model the test asks more of its own", () => {
    // Stores lie within areas here, so what areas do by chance can look like stores.
    const within = { ...data, area: data.store.map((store) => (Number(store.slice(1)) <= 2 ? "west" : "east")) };
    const terms: ModelSpec["terms"] = [{ kind: "random-effect", column: "store", smoothness: { penalty: 2 } }, { kind: "random-effect", column: "area", smoothness: { penalty: 2 } }];
    const fit = (some: ModelSpec["terms"]) => fitModel({ response: "y", family: "gaussian", terms: some }, within);
    const [alone, both] = [testOf(fit(terms.slice(0, 1)), "store"), testOf(fit(terms), "store")];
    expect(both.pValue).toBeGreaterThan(alone.pValue);
  });
});

describe("Curves of given shape", () => {
  const terms = (shape?: "decreasing"): ModelSpec["terms"] => [{ kind: "smooth", column: "price", shape }, { kind: "factor", column: "promotion", reference: "none" }];

  it("are reported with finite numbers, and AIC says what it counts", () => {
    const report = modelReport(exampleModel("curves and a factor", { terms: terms("decreasing") }));
    expect(report.terms[0].test!.pValue).toBeLessThan(0.001);
    expect(Number.isFinite(report.terms[0].test!.statistic)).toBe(true);
    expect(Number.isFinite(report.aic)).toBe(true);
    expect(report.aicReason).toBe("a curve of given shape is counted as if it were free to bend");
    expect(modelReport(exampleModel("curves and a factor", { terms: terms() })).aicReason).toBe(null);
  });
});

describe("Tests in other families", () => {
  const counts = { ...data, units: data.units.map((value) => value + 1) };
  const terms: ModelSpec["terms"] = [{ kind: "smooth", column: "price", size: 7, smoothness: { df: 3 } }, { kind: "random-effect", column: "store", smoothness: { penalty: 5 } }, { kind: "factor", column: "promotion", reference: "none" }];
  const fit = (family: ModelSpec["family"], response = "units") => fitModel({ response, family, terms }, counts);

  it("are F where the dispersion is estimated and chi-square where it is known", () => {
    for (const [family, distribution] of [["gaussian", "F"], ["log-gaussian", "F"], ["quasi-poisson", "F"], ["negative-binomial", "chi-square"]] as const) {
      for (const { id, test } of modelReport(fit(family)).terms) {
        expect(test?.distribution, `${family}: ${id}`).toBe(distribution);
        expect(test?.residualDegreesOfFreedom === null, `${family}: ${id}`).toBe(distribution === "chi-square");
        expect(test?.approximate, `${family}: ${id}`).toBe(true);
      }
    }
  });

  it("of a log-gaussian model are those of a gaussian model of the logarithm (1e-9)", () => {
    const logs = { ...counts, logs: counts.units.map(Math.log) };
    const [one, other] = [modelReport(fit("log-gaussian")), modelReport(fitModel({ response: "logs", family: "gaussian", terms }, logs))];
    one.terms.forEach(({ id, test, curveTest, concurvity }, k) => {
      expect(relative(other.terms[k].test!.statistic, test!.statistic), id).toBeLessThan(1e-9);
      if (curveTest !== null) expect(relative(other.terms[k].curveTest!.pValue, curveTest.pValue), id).toBeLessThan(1e-7);
      expect(other.terms[k].concurvity).toBeCloseTo(concurvity ?? Number.NaN, 9);
    });
    // The density of units is that of their logarithm over units.
    const jacobian = counts.units.reduce((sum, value) => sum + Math.log(value), 0);
    expect(one.aic! - other.aic!).toBeCloseTo(2 * jacobian, 6);
  });

  it("of very weakly overdispersed counts come near to each other: theta large, dispersion near 1", () => {
    const normal = seededNormal(9);
    const steady = data.price.map((price) => Math.max(0, Math.round(60 - 20 * price + Math.sqrt(60 - 20 * price) * normal())));
    const fitSteady = (family: ModelSpec["family"]) => fitModel({ response: "steady", family, terms: terms.slice(0, 1) }, { ...data, steady });
    const [quasi, binomial] = [fitSteady("quasi-poisson"), fitSteady("negative-binomial")];
    const [one, other] = [testOf(quasi, "price"), testOf(binomial, "price")];
    expect(other.referenceDegreesOfFreedom).toBeCloseTo(one.referenceDegreesOfFreedom, 1);
    expect(relative(one.statistic * one.referenceDegreesOfFreedom * quasi.dispersion, other.statistic)).toBeLessThan(0.1);
  });
});
