import { fitModel, predict } from "@shared/engine";
import type { Family, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, modelOf, withPenalty } from "../support/every-kind-rows";
import { largestDifference, largestRelativeDifference } from "../support/measures";
import { plainFit } from "../support/plain-fit";

const base = everyKindRows(51, 96);
const rows = { ...base, exposure: base.depth.map((value, row) => value - 0.1 * (row % 3)), w: base.price.map((_, row) => 0.5 + (row % 5) / 2) };
const kinds = Object.entries(everyKind).filter(([name]) => name !== "local regression");
const specOf = (family: Family, terms: readonly TermSpec[], change: Partial<ModelSpec> = {}): ModelSpec =>
  modelOf(family, terms, { offset: "exposure", weights: family === "binomial" ? "trials" : "w", ...change });

const meanOf = (values: ArrayLike<number>) => Array.from(values).reduce((sum, value) => sum + value, 0) / values.length;

/** Working models rest when the predictor moves by less than 3e-7. */
const rest = 1e-6;

describe.each(families)("At given penalties the fit is the penalised one by dense matrices, weights and offset in it: %s", (family) => {
  describe.each(kinds)("%s", (_name, terms) => {
    const spec = specOf(family, terms);
    const model = fitModel(spec, rows);
    const plain = plainFit(spec, rows, model.theta ?? 1);
    const predicted = predict(model, rows);

    it("in predictor, contributions and standard errors", () => {
      expect(largestDifference(predicted.linearPredictor, plain.linearPredictor)).toBeLessThan(rest);
      expect(largestRelativeDifference(predicted.standardError, plain.standardError)).toBeLessThan(10 * rest);
      model.terms.forEach(({ id }, at) => {
        const own = predicted.contributions[id];
        const middle = meanOf(own);
        expect(largestDifference(own.map((value) => value - middle), plain.terms[at].contribution)).toBeLessThan(rest);
      });
    });

    it("in degrees of freedom, dispersion and deviance", () => {
      expect(model.edf).toBeCloseTo(plain.edf, 6);
      model.terms.forEach(({ edf }, at) => expect(edf).toBeCloseTo(plain.terms[at].edf, 6));
      expect(model.dispersion / plain.dispersion).toBeCloseTo(1, 7);
      expect(model.deviance / plain.deviance).toBeCloseTo(1, 7);
      expect(model.converged).toBe(true);
    });
  });
});

/** Penalised coordinates in all, groups and directions included: S is lambda times a matrix of that rank. */
const ranks: Record<string, number> = {
  line: 0, factor: 0, smooth: 5, "smooth per level": 15, "smooth times a number": 5, circle: 7, "natural spline": 0,
  "random walk": 39, "random effect": 5 + 4, "random slope": 5 + 4, "factor-smooth": 5 + 20, "tensor product": 15,
};

/** Columns without a penalty, the intercept among them. */
const unpenalisedOf: Record<string, number> = {
  line: 2, factor: 3, smooth: 2, "smooth per level": 6, "smooth times a number": 3, circle: 1, "natural spline": 4,
  "random walk": 1, "random effect": 2, "random slope": 2, "factor-smooth": 2, "tensor product": 2,
};

describe("The criterion compares penalties as the restricted likelihood does that is written out", () => {
  it.each(kinds)("of a normal model with %s: 1/2 [(n - Mp) ln(D + b'Sb) + ln|X'X + S| - rank ln(penalty)]", (name, terms) => {
    const at = (penalty: number) => {
      const spec = specOf("gaussian", withPenalty(terms, penalty));
      return { own: fitModel(spec, rows).criterion, ...plainFit(spec, rows) };
    };
    const [loose, stiff] = [at(0.4), at(60)];
    const unpenalised = unpenalisedOf[name];
    const change = 0.5 * ((rows.y.length - unpenalised) * Math.log(stiff.penalisedDeviance / loose.penalisedDeviance)
      + stiff.logDeterminant - loose.logDeterminant - ranks[name] * Math.log(60 / 0.4));
    expect(stiff.own - loose.own).toBeCloseTo(change, 6);
  });
});
