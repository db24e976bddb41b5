import { fitModel, modelReport, predict } from "@shared/engine";
import type { FittedModel, ModelData, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKindRows, modelOf } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

/** Data on which fits once ran off, swung or broke: each row of them matters, so they are given in full. */
const allFinite = (model: FittedModel) => [...model.coefficients, ...model.covariance, ...model.fitted, model.criterion, model.dispersion, ...model.terms.flatMap(({ penalties }) => penalties)].every(Number.isFinite);

describe("Working models that swing come to rest by shorter steps", () => {
  it("counts of a few rows with one of a thousand, around a circle with an offset", () => {
    const rows: ModelData = {
      counts: [2, 0, 4, 12, 9, 1, 1000, 9, 3, 3, 5, 9, 1, 3, 4, 10],
      week: [3, 17, 9, 28, 11, 2, 20, 25, 14, 6, 30, 8, 19, 1, 22, 13],
      price: [1.2, 3.4, 0.6, 2.2, 4.1, 2.8, 1.9, 0.3, 4.7, 3.1, 2.5, 1.1, 0.8, 3.9, 2.1, 1.4],
    };
    for (const family of ["quasi-poisson", "negative-binomial"] as const) {
      const model = fitModel({ response: "counts", family, offset: "price", terms: [{ kind: "cyclic-smooth", column: "week", period: [-3, 40], size: 6 }] }, rows);
      expect([model.converged, allFinite(model)]).toEqual([true, true]);
      expect(Math.max(...model.fitted)).toBeLessThan(1e4);
    }
  });

  it("with the same answer where no swing was", () => {
    const rows = everyKindRows(3, 60);
    const terms: TermSpec[] = [{ kind: "smooth", column: "price", size: 7 }, { kind: "cyclic-smooth", column: "season", period: [0, 1] }];
    const model = fitModel(modelOf("quasi-poisson", terms), rows);
    expect(model.converged).toBe(true);
    expect(model.iterations).toBeLessThan(40);
    const held = terms.map((term, at) => ({ ...term, smoothness: { penalty: model.terms[at].penalties[0] } }) as TermSpec);
    // Penalties rest at 1e-7 of a gradient.
    expect(largestDifference(fitModel(modelOf("quasi-poisson", held), rows).coefficients, model.coefficients)).toBeLessThan(1e-5);
  });
});

describe("A negative binomial with one week of a thousand among a dozen's", () => {
  it("stays within reason, curves per group and all", () => {
    const counts = [12, 9, 2, 0, 2, 0, 0, 10, 8, 6, 9, 2, 3, 1, 11, 12, 9, 3, 8, 6, 7, 2, 3, 6, 10, 0, 4, 1000, 10, 10, 11, 7, 11, 8];
    const rows: ModelData = { counts, exposure: counts.map((_, row) => ((row * 37) % 34) / 8.5 - 2), store: counts.map((_, row) => `s${row % 5}`) };
    const model = fitModel({
      response: "counts", family: "negative-binomial",
      terms: [{ kind: "smooth", column: "exposure", size: 7 }, { kind: "factor-smooth", column: "exposure", group: "store", size: 6 }],
    }, rows);
    expect(allFinite(model)).toBe(true);
    expect(model.theta).toBeGreaterThan(0.1);
    expect(Math.max(...model.fitted)).toBeLessThan(1e4);
  });
});

describe("Rows in two places, one of them far off,", () => {
  const uniform = everyKindRows(9, 60);
  const far = uniform.price.map((price, row) => (row === 17 ? 1e9 : price));
  const rows: ModelData = { ...uniform, far };

  it.each(["gaussian", "quasi-poisson", "negative-binomial", "binomial"] as const)("carry curves per group without running off: %s", (family) => {
    const model = fitModel(modelOf(family, [{ kind: "smooth", column: "far", size: 7 }, { kind: "factor-smooth", column: "far", group: "store", size: 5 }]), rows);
    expect(allFinite(model)).toBe(true);
    expect(Math.max(...model.terms.flatMap(({ penalties }) => penalties))).toBeLessThan(1e12);
    expect(predict(model, rows).standardError.every(Number.isFinite)).toBe(true);
  });
});

describe("A response without any variation", () => {
  it.each<[string, "gaussian" | "quasi-poisson"]>([["normal", "gaussian"], ["counts", "quasi-poisson"]])("is fitted exactly, with a reason in place of tests and AIC: %s", (_name, family) => {
    const rows = everyKindRows(2, 50);
    const constant = { ...rows, y: rows.y.map(() => 2), counts: rows.y.map(() => 2) };
    const model = fitModel(modelOf(family, [{ kind: "smooth", column: "price", size: 7 }, { kind: "random-walk", column: "week" }, { kind: "linear", column: "depth" }]), constant);
    expect(allFinite(model)).toBe(true);
    expect([...(model.information?.criterionHessian ?? [])].every(Number.isFinite)).toBe(true);
    expect(largestDifference(model.fitted, rows.y.map(() => 2))).toBeLessThan(1e-9);
    const report = modelReport(model);
    expect(report.aic).toBeNull();
    for (const term of report.terms) {
      expect([term.test, term.curveTest]).toEqual([null, null]);
      expect(term.testReason).toBe("the model reproduces the response exactly, which leaves no noise to judge by");
    }
  });
});

describe("A penalty given too small for its rows", () => {
  const fit = (penalty: number) => {
    const rows = { ...everyKindRows(5, 24), weight: new Array<number>(24).fill(1e20) };
    return fitModel(modelOf("gaussian", [{ kind: "smooth", column: "price", size: 60, smoothness: { penalty } }], { weights: "weight" }), rows);
  };

  it("is raised until the fit is determined, and the warning says to what", () => {
    const model = fit(1e-12);
    const [penalty] = model.terms[0].penalties;
    expect(penalty).toBeGreaterThan(1);
    expect(model.warnings).toContainEqual({
      code: "penalty-raised", term: "price",
      message: `Term "price": with penalty 1e-12 these rows leave its curve undetermined; it is fitted with ${Number(penalty.toPrecision(3))}.`,
    });
  });

  it("is kept, without a word, where it is large enough", () => {
    const model = fit(1e14);
    expect(model.terms[0].penalties[0] / 1e14).toBeCloseTo(1, 12);
    expect(model.warnings.map(({ code }) => code)).not.toContain("penalty-raised");
  });
});
