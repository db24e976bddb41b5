import { fitModel, modelReport, predict } from "@shared/engine";
import type { Family, ModelData, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, inOrder, modelOf, withAuto, withPenalty } from "./support/every-kind-rows";
import { largestDifference } from "./support/measures";

/** Weights, units, offsets and numbers of rows at the ends of what is taken. */
const rows = everyKindRows(23, 100);
const numbers = rows.y.map((_, row) => row);
const kinds = Object.entries(everyKind);
const predictorOf = (spec: ModelSpec, data: ModelData) => predict(fitModel(spec, data), rows).linearPredictor;


describe.each(families)("A row of a weight near zero says nothing, however wrong it is: %s", (family) => {
  const column = modelOf(family, []).response as "y";
  const wrong = { ...rows, [column]: rows[column].map((value, row) => (row === 50 ? (family === "binomial" ? Number(value < 0.6) : 3 * value + 1) : value)) };
  const weighted = (weight: number) => ({ ...wrong, weight: numbers.map((row) => (row === 50 ? weight : 1)) });

  it.each(kinds)("beside a %s, penalties chosen", (_name, terms) => {
    const spec = modelOf(family, withAuto(terms), { weights: "weight" });
    const small = predictorOf(spec, weighted(1e-9));
    for (const weight of [1e-16, 1e-49]) expect(largestDifference(predictorOf(spec, weighted(weight)), small)).toBeLessThan(1e-5);
    const loud = predictorOf(spec, weighted(1));
    expect(largestDifference(loud, small)).toBeGreaterThan(1e-4);
  });

  it("weighs down to 1e-50, and is refused below", () => {
    const spec = modelOf(family, everyKind.line, { weights: "weight" });
    expect(fitModel(spec, weighted(1e-50)).converged).toBe(true);
    expect(() => fitModel(spec, weighted(9e-51))).toThrow('Column "weight" (weights) must be 0 or at least 1e-50; row 51 is 9e-51.');
  });
});

describe("Units of responses and columns, powers of ten up and down", () => {
  const scaled = families.filter((family) => family !== "binomial" && family !== "negative-binomial");
  const moved: Partial<Record<Family, (predictor: number, unit: number) => number>> = {
    gaussian: (predictor, unit) => predictor * unit,
    "log-gaussian": (predictor, unit) => predictor + Math.log(unit),
    "quasi-poisson": (predictor, unit) => predictor + Math.log(unit),
  };

  it.each(scaled.flatMap((family) => kinds.map(([name, terms]) => ({ family, name, terms }))))("change the predictor of a $family response by their rule: $name", ({ family, terms }) => {
    const spec = modelOf(family, terms);
    const column = spec.response as "y";
    const plain = predictorOf(spec, rows);
    for (const unit of [1e-10, 1e10]) {
      // Counts are weights of working models too: penalties given are in their unit.
      const own = family === "quasi-poisson" ? { ...spec, terms: withPenalty(terms, 3 * unit) } : spec;
      const changed = predictorOf(own, { ...rows, [column]: rows[column].map((value) => value * unit) });
      const size = family === "gaussian" ? unit : 1;
      expect(largestDifference(changed.map((value) => value / size), plain.map((value) => (moved[family]?.(value, unit) ?? Number.NaN) / size))).toBeLessThan(1e-6);
    }
  });

  it.each(kinds)("change nothing where they are a column's: %s", (_name, terms) => {
    const spec = modelOf("gaussian", withAuto(terms));
    const plain = predict(fitModel(spec, rows), rows).linearPredictor;
    for (const unit of [1e-20, 1e20]) {
      const data = { ...rows, price: rows.price.map((value) => value * unit), temperature: rows.temperature.map((value) => value * unit), depth: rows.depth.map((value) => value * unit) };
      expect(largestDifference(predict(fitModel(spec, data), data).linearPredictor, plain)).toBeLessThan(1e-5);
    }
  });
});

describe("Offsets far from zero are taken off by the level alone", () => {
  it.each(families.flatMap((family) => kinds.map(([name, terms]) => ({ family, name, terms }))))("$family, $name", ({ family, terms }) => {
    const spec = modelOf(family, terms);
    const plain = fitModel(spec, rows);
    for (const offset of [-200, 200]) {
      const other = fitModel({ ...spec, offset: "far" }, { ...rows, far: numbers.map(() => offset) });
      expect(other.converged).toBe(true);
      const size = Math.max(...plain.fitted.map(Math.abs));
      expect(largestDifference(other.fitted, plain.fitted)).toBeLessThan(1e-5 * size);
    }
  });
});

describe("Few rows end in a model of finite numbers or in an error that names the rule", () => {
  const few = [2, 3, 4, 6, 9];

  it.each(families.flatMap((family) => kinds.map(([name, terms]) => ({ family, name, terms }))))("$family, $name", ({ family, terms }) => {
    for (const count of few) {
      const data = inOrder(rows, numbers.slice(0, count).map((row) => (7 * row) % 100));
      let model;
      try {
        model = fitModel(modelOf(family, withAuto(terms)), data);
      } catch (error) {
        expect(error).toMatchObject({ name: "EngineError", code: expect.stringMatching(/^(too-few-rows|column-few-values|column-constant|spec-invalid|response-invalid)$/) as string });
        continue;
      }
      const report = modelReport(model);
      const values = [...model.coefficients, ...model.covariance, ...model.fitted, model.dispersion, model.criterion, model.deviance, ...report.terms.map(({ edf }) => edf)];
      expect(values.every(Number.isFinite)).toBe(true);
      expect(model.edf).toBeLessThan(count + 1e-4);
      expect(model.dispersion).toBeGreaterThanOrEqual(0);
    }
  });

  it("of nothing but its level is the mean, from two rows on", () => {
    const spec = { response: "y", family: "gaussian", terms: [] } as ModelSpec;
    const { coefficients, fitted, edf, dispersion } = fitModel(spec, { y: [1, 4] });
    expect([...coefficients, ...fitted, edf]).toEqual([2.5, 2.5, 2.5, 1]);
    expect(dispersion).toBeCloseTo(4.5, 12);
    expect(() => fitModel(spec, { y: [1] })).toThrow("The data has 1 rows of weight above 0; a fit needs at least 2.");
  });
});

describe("A level that only rows of weight zero have", () => {
  const terms: TermSpec[] = [{ kind: "factor", column: "promotion" }];
  const odd = { ...rows, promotion: rows.promotion.map((level, row) => (row === 5 ? "odd" : level)), weight: numbers.map((row) => Number(row !== 5)) };

  it("is one never seen: the row has no fitted value, and the fit is refused by its name", () => {
    expect(() => fitModel(modelOf("gaussian", terms, { weights: "weight" }), odd)).toThrow(
      'Level "odd" of factor "promotion" (row 6) was never seen in the fit; seen were "display", "feature", "none".',
    );
  });

  it("of a group is predicted as the chain's", () => {
    const data = { ...rows, store: rows.store.map((name, row) => (row === 5 ? "odd" : name)), weight: odd.weight };
    const model = fitModel(modelOf("gaussian", everyKind["random effect"], { weights: "weight" }), data);
    expect(model.fitted[5]).toBeCloseTo(predict(model, { price: [data.price[5]], store: ["odd"] }).mean[0], 12);
    expect(model.rowCount).toBe(99);
  });
});
