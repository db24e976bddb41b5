import { fitModel, predict } from "@shared/engine";
import type { TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { seededNormal, seededUniform } from "../support/generator";
import { largestDifference } from "../support/measures";
import { plainBackfit, plainOperator, plainSmoother, trace } from "./plain-backfitting";

const count = 48;
const uniform = seededUniform(41);
const normal = seededNormal(42);
const x = Array.from({ length: count }, () => Math.round(60 * uniform()) / 10);
const z = x.map((value) => Math.round(20 * (0.3 * value + 2 * uniform())) / 20);
const line = x.map((value) => 0.2 * value + normal());
const promotion = x.map(() => (uniform() < 0.3 ? "feature" : "none"));
const weight = x.map(() => 0.5 + 2 * uniform());
const y = x.map((value, k) => Math.sin(value) + 0.3 * z[k] ** 2 + 0.4 * line[k] + (promotion[k] === "feature" ? 0.5 : 0) + 0.2 * normal());
const data = { x, z, line, promotion, weight, y };

const localX = (degree: 0 | 1 | 2): TermSpec => ({ kind: "local-regression", column: "x", span: 0.5, degree });
const localZ = (degree: 0 | 1 | 2): TermSpec => ({ kind: "local-regression", column: "z", span: 0.6, degree });
const straight: TermSpec = { kind: "linear", column: "line" };
const factor: TermSpec = { kind: "factor", column: "promotion", reference: "none" };
const feature = promotion.map((level) => (level === "feature" ? 1 : 0));

type Case = { name: string; terms: TermSpec[]; columns: number[][]; weights: number[] | null; degrees: { x: 0 | 1 | 2; z: 0 | 1 | 2 | null } };
const cases: Case[] = [
  { name: "a local line alone", terms: [localX(1)], columns: [], weights: null, degrees: { x: 1, z: null } },
  { name: "a local line beside a straight line", terms: [straight, localX(1)], columns: [line], weights: null, degrees: { x: 1, z: null } },
  { name: "a local parabola beside a factor and a line, weighted", terms: [localX(2), factor, straight], columns: [feature, line], weights: weight, degrees: { x: 2, z: null } },
  { name: "two local lines", terms: [localX(1), localZ(1)], columns: [], weights: null, degrees: { x: 1, z: 1 } },
  { name: "a local mean and a local parabola beside a line and a factor, weighted", terms: [localX(0), straight, localZ(2), factor], columns: [line, feature], weights: weight, degrees: { x: 0, z: 2 } },
];

function plainOf({ columns, weights, degrees }: Case) {
  const own = weights ?? x.map(() => 1);
  const smoothers = [plainSmoother(x, own, { span: 0.5, degree: degrees.x })];
  if (degrees.z !== null) smoothers.push(plainSmoother(z, own, { span: 0.6, degree: degrees.z }));
  return { own, fit: (response: number[]) => plainBackfit(response, own, { columns, smoothers }) };
}

const fitted = ({ terms, weights }: Case) =>
  fitModel({ response: "y", family: "gaussian", ...(weights === null ? {} : { weights: "weight" }), terms }, data);

describe("A model with local regressions is where plain backfitting rests", () => {
  // Cycles stop at 1e-14, and close in on their end by at least a tenth each.
  it.each(cases)("in its fitted values and each term, to 1e-9: $name", (one) => {
    const { fit } = plainOf(one);
    const reference = fit(y);
    const model = fitted(one);
    expect(model.converged).toBe(true);
    expect(largestDifference(model.fitted, reference.predictor)).toBeLessThan(1e-9);
    const { contributions } = predict(model, data);
    const mean = (values: ArrayLike<number>) => Array.from(values).reduce((total, value) => total + value, 0) / count;
    ["x", "z"].filter((id) => id in contributions).forEach((id, at) => {
      const curve = reference.curves[at];
      expect(largestDifference(contributions[id], curve.map((value) => value - mean(curve)))).toBeLessThan(1e-9);
      expect(Math.abs(mean(contributions[id]))).toBeLessThan(1e-12);
    });
  });

  it.each(cases)("in its standard errors, by the operator's rows, to 1e-9: $name", (one) => {
    const { own, fit } = plainOf(one);
    const operator = plainOperator(count, (response) => fit(response).predictor);
    const model = fitted(one);
    const { standardError } = predict(model, data);
    const reference = operator.map((row) => Math.sqrt(model.dispersion * row.reduce((total, value, k) => total + value ** 2 / own[k], 0)));
    expect(largestDifference(standardError, reference)).toBeLessThan(1e-9);
  });

  it.each(cases)("in its degrees of freedom, by the operators' traces, to 1e-8: $name", (one) => {
    const { own, fit } = plainOf(one);
    const model = fitted(one);
    const operator = plainOperator(count, (response) => fit(response).predictor);
    expect(Math.abs(model.edf - trace(operator))).toBeLessThan(1e-8);
    ["x", "z"].forEach((id, at) => {
      const term = model.terms.find((candidate) => candidate.id === id);
      if (term === undefined) return;
      const own = trace(plainOperator(count, (response) => fit(response).curves[at]));
      expect(Math.abs(term.edf - own)).toBeLessThan(1e-8);
    });
    // tr(LL') in the rows' weights (Cleveland & Devlin 1988).
    const squares = operator.reduce((total, row, at) => total + row.reduce((sum, value, k) => sum + (own[at] * value ** 2) / own[k], 0), 0);
    expect(model.dispersion / (model.deviance / (count - 2 * model.edf + squares))).toBeCloseTo(1, 9);
  });
});

describe("Local scoring", () => {
  it("rests where working models backfitted plainly do, to 1e-8 of the linear predictor", () => {
    const units = y.map((value, k) => Math.round(Math.exp(1.5 + 0.4 * value) * (1 + 0.1 * Math.cos(k))));
    const terms: TermSpec[] = [localX(1), factor, localZ(1)];
    const model = fitModel({ response: "units", family: "quasi-poisson", terms }, { ...data, units });
    let predictor = units.map((value) => Math.log(value + 0.1));
    for (let cycle = 0; cycle < 60; cycle++) {
      const mean = predictor.map(Math.exp);
      const working = predictor.map((value, k) => value + (units[k] - mean[k]) / mean[k]);
      const smoothers = [plainSmoother(x, mean, { span: 0.5, degree: 1 }), plainSmoother(z, mean, { span: 0.6, degree: 1 })];
      const next = plainBackfit(working, mean, { columns: [feature], smoothers }).predictor;
      const moved = largestDifference(next, predictor);
      predictor = next;
      if (moved < 1e-11) break;
    }
    expect(model.converged).toBe(true);
    expect(largestDifference(predict(model, data).linearPredictor, predictor)).toBeLessThan(1e-8);
    expect(largestDifference(model.fitted, predictor.map(Math.exp))).toBeLessThan(1e-6);
  });
});
