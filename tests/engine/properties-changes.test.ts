import { fitModel, predict } from "@shared/engine";
import type { Family, FittedModel, ModelData, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, inOrder, modelOf, withAuto } from "./support/every-kind-rows";
import { largestDifference, largestRelativeDifference } from "./support/measures";

/** What must not change a fit, or must change it by a rule, for every kind of term and every family. */
const rows = everyKindRows(23, 100);
const count = rows.y.length;
const numbers = rows.y.map((_, row) => row);
const kinds = Object.entries(everyKind);

/** Working models and penalties rest within these of where they would come to. */
const tolerance: Record<Family, number> = { gaussian: 1e-6, "log-gaussian": 1e-6, "quasi-poisson": 3e-5, "negative-binomial": 3e-5, binomial: 3e-5 };
const termsOf = ({ terms }: FittedModel) => terms.map(({ edf }) => edf);
const isSameFit = (family: Family, one: FittedModel, other: FittedModel, at: readonly number[] = numbers): void => {
  expect(largestRelativeDifference(one.fitted, at.map((row) => other.fitted[row]))).toBeLessThan(tolerance[family]);
  expect(largestDifference(termsOf(one), termsOf(other))).toBeLessThan(100 * tolerance[family]);
};

describe.each(families)("A %s model", (family) => {
  describe.each(kinds)("with a %s", (_name, terms) => {
    const spec = modelOf(family, withAuto(terms));
    const given = modelOf(family, terms);
    const model = fitModel(given, rows);

    it("does not depend on the order of rows, penalties chosen", () => {
      const order = numbers.map((row) => (row * 37 + 11) % count);
      isSameFit(family, fitModel(spec, inOrder(rows, order)), fitModel(spec, rows), order);
    });

    it("does not depend on the order of its terms", () => {
      const turned = { ...given, terms: [...given.terms].reverse() };
      expect(largestRelativeDifference(fitModel(turned, rows).fitted, model.fitted)).toBeLessThan(tolerance[family]);
    });

    it("reads no column but its own, and does not mind what they are called", () => {
      const own = Object.keys(rows).filter((column) => JSON.stringify(given).includes(`"${column}"`));
      const called = (column: string) => `the ${column}`;
      const renamed = Object.fromEntries(own.map((column) => [called(column), rows[column as keyof typeof rows]])) as ModelData;
      const changed = JSON.parse(own.reduce((text, column) => text.replaceAll(new RegExp(`"(column|by|group|response)":"${column}"`, "g"), `"$1":"${called(column)}"`)
        .replaceAll(new RegExp(`(\\[|,)"${column}"(?=[\\],])`, "g"), `$1"${called(column)}"`), JSON.stringify(given))) as ModelSpec;
      expect(fitModel(changed, renamed).fitted).toEqual(model.fitted);
    });

    it("moves its level alone when a constant is added to the offset: the intercept takes it off", () => {
      const shifted = fitModel({ ...given, offset: "exposure" }, { ...rows, exposure: numbers.map(() => 1.25) });
      expect(shifted.coefficients[0] - model.coefficients[0]).toBeCloseTo(-1.25, 5);
      expect(largestRelativeDifference(shifted.fitted, model.fitted)).toBeLessThan(tolerance[family]);
      expect(largestDifference(shifted.coefficients.slice(1), model.coefficients.slice(1))).toBeLessThan(100 * tolerance[family]);
    });

    it("is not changed by a row of weight zero, whatever it holds", () => {
      const beside = inOrder(rows, [...numbers, 0]);
      const weight = [...numbers.map(() => 1), 0];
      const wild = { ...beside, price: beside.price.map((value, row) => (row === count ? 40 : value)), y: beside.y.map((value, row) => (row === count ? -1e6 : value)), weight };
      const other = fitModel({ ...given, weights: "weight" }, wild);
      expect(largestRelativeDifference(other.fitted.slice(0, count), model.fitted)).toBeLessThan(1e-12);
      expect(other.rowCount).toBe(count);
    });

    it("predicts its own rows as it fitted them, one by one as all at once", () => {
      const whole = predict(model, rows);
      expect(largestRelativeDifference(whole.mean, model.fitted)).toBeLessThan(1e-10);
      for (const row of [0, 41, 99]) {
        const one = predict(model, inOrder(rows, [row]));
        expect([one.mean[0], one.lower[0], one.upper[0], one.standardError[0]]).toEqual([whole.mean[row], whole.lower[row], whole.upper[row], whole.standardError[row]]);
      }
    });
  });
});

/** Kinds whose columns do not depend on how many rows there are: quantiles, windows, margins and parts of groups' curves do. */
const ofRange = kinds.filter(([name]) => !["natural spline", "local regression", "tensor product", "factor-smooth"].includes(name));

describe.each(families)("Rows split into two that share their weight leave a %s fit as it is", (family) => {
  it.each(ofRange)("with a %s", (_name, terms) => {
    const spec = modelOf(family, terms);
    const some = numbers.slice(0, 30);
    const split = { ...inOrder(rows, [...numbers, ...some]), weight: [...numbers.map((row) => (row < 30 ? 0.25 : 1)), ...some.map(() => 0.75)] };
    const [whole, parts] = [fitModel(spec, rows), fitModel({ ...spec, weights: "weight" }, split)];
    // The mean of a lognormal knows the dispersion, and that knows the number of rows.
    const predictors = [whole, parts].map((model) => predict(model, rows).linearPredictor);
    expect(largestDifference(predictors[1], predictors[0])).toBeLessThan(tolerance[family]);
  });
});

/** Per family, how the response may be changed, and what of the linear predictor follows. */
const changes: { family: Family; what: string; response: (value: number) => number; predictor: (value: number) => number }[] = [
  { family: "gaussian", what: "stretched and moved", response: (value) => 7 - 3 * value, predictor: (value) => 7 - 3 * value },
  { family: "log-gaussian", what: "in another unit", response: (value) => 12 * value, predictor: (value) => value + Math.log(12) },
  { family: "log-gaussian", what: "turned over", response: (value) => 1 / value, predictor: (value) => -value },
  { family: "quasi-poisson", what: "by the dozen", response: (value) => 12 * value, predictor: (value) => value + Math.log(12) },
  { family: "binomial", what: "of those who did not", response: (value) => 1 - value, predictor: (value) => -value },
];

describe.each(changes)("A $family response $what", ({ family, response, predictor }) => {
  it.each(kinds)("changes the predictor by its rule, penalties chosen, with a %s", (name, terms) => {
    const spec = modelOf(family, withAuto(terms));
    const column = spec.response as "y";
    const [before, after] = [rows, { ...rows, [column]: rows[column].map(response) }].map((data) => predict(fitModel(spec, data), data).linearPredictor);
    expect(largestDifference(after, before.map(predictor))).toBeLessThan(name === "local regression" ? 1e-4 : 30 * tolerance[family]);
  });
});

describe("Columns turned round, moved or in another unit", () => {
  const mirrored: [string, TermSpec, (data: typeof rows) => typeof rows][] = [
    ["a circle by whole turns", { kind: "cyclic-smooth", column: "season", period: [0, 1], size: 8 }, (data) => ({ ...data, season: data.season.map((value, row) => value + (row % 3) - 1) })],
    ["a slowly moving level by a thousand weeks", { kind: "random-walk", column: "week" }, (data) => ({ ...data, week: data.week.map((value) => value + 1000) })],
    ["a slowly moving level turned round", { kind: "random-walk", column: "week" }, (data) => ({ ...data, week: data.week.map((value) => -value) })],
    ["a smooth turned round", { kind: "smooth", column: "temperature", size: 8 }, (data) => ({ ...data, temperature: data.temperature.map((value) => -value) })],
    ["a smooth of a logarithm turned round", { kind: "smooth", column: "price", log: true, size: 8 }, (data) => ({ ...data, price: data.price.map((value) => 3 / value) })],
    ["a natural spline turned round", { kind: "natural-spline", column: "temperature", df: 4 }, (data) => ({ ...data, temperature: data.temperature.map((value) => 10 - 2 * value) })],
    ["a local regression turned round", { kind: "local-regression", column: "temperature", span: 0.6, degree: 2 }, (data) => ({ ...data, temperature: data.temperature.map((value) => 10 - 2 * value) })],
    ["a surface with one side turned round", { kind: "tensor-product", columns: ["price", "temperature"] }, (data) => ({ ...data, temperature: data.temperature.map((value) => -value) })],
    ["levels by other names", { kind: "factor", column: "promotion" }, (data) => ({ ...data, promotion: data.promotion.map((level) => `z ${level}`) })],
    ["groups by numbers for names", { kind: "random-effect", column: "store" }, (data) => ({ ...data, store: data.store.map((name) => String(10 - name.length)) })],
  ];
  const withDistinct = { ...rows, store: rows.store.map((name) => ({ north: "n", south: "so", east: "eas", west: "west" })[name] ?? name) };

  it.each(families.flatMap((family) => mirrored.map(([name, term, change]) => ({ family, name, term, change }))))("$family: $name is the same fit", ({ family, term, change }) => {
    const spec = modelOf(family, [term]);
    isSameFit(family, fitModel(spec, change(withDistinct)), fitModel(spec, withDistinct));
  });
});
