import { fitModel } from "@shared/engine";
import type { Family, FittedModel, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, inOrder, modelOf } from "../support/every-kind-rows";
import { largestDifference, largestRelativeDifference } from "../support/measures";

/** Penalties chosen, against fits at penalties given: the criterion is the least there is, and bends as the model remembers. */
const rows = everyKindRows(67, 100);
const numbers = rows.y.map((_, row) => row);
const exact: Family[] = ["gaussian", "log-gaussian"];
/** Terms of one penalty, beside unpenalised ones alone. */
const single: Record<string, TermSpec[]> = {
  smooth: everyKind.smooth, "smooth times a number": everyKind["smooth times a number"], circle: everyKind.circle, "random walk": everyKind["random walk"],
  "random effect": [everyKind.line[0], everyKind["random effect"][1]], "random slope": [everyKind.line[0], everyKind["random slope"][1]],
  "smooth beside a factor": [...everyKind.factor, ...everyKind.smooth],
};
const withPenalties = (terms: readonly TermSpec[], penalties: readonly (number | "auto")[]): TermSpec[] => {
  let next = 0;
  return terms.map((term) => {
    if (!("smoothness" in term)) return term;
    const own = penalties[next++];
    return { ...term, smoothness: own === "auto" ? own : { penalty: own } };
  });
};
const within = (penalty: number) => Math.min(9e14, Math.max(1.1e-12, penalty));
const penaltiesOf = (model: FittedModel) => model.terms.flatMap(({ penalties }) => penalties);

describe.each(exact)("Of a %s model with one penalty", (family) => {
  it.each(Object.entries(single))("none of 60 penalties from e^-14 to e^16 has a lower criterion than the chosen one: %s", (_name, terms) => {
    const chosen = fitModel(modelOf(family, withPenalties(terms, ["auto"])), rows);
    for (let k = 0; k < 60; k++) {
      const given = fitModel(modelOf(family, withPenalties(terms, [within(Math.exp(-14 + k / 2))])), rows);
      expect(given.criterion).toBeGreaterThan(chosen.criterion - 1e-6);
    }
  });

  it.each(Object.entries(single))("given the chosen penalty it is the same fit: %s", (_name, terms) => {
    const chosen = fitModel(modelOf(family, withPenalties(terms, ["auto"])), rows);
    const given = fitModel(modelOf(family, withPenalties(terms, [within(penaltiesOf(chosen)[0])])), rows);
    expect(largestRelativeDifference(given.fitted, chosen.fitted)).toBeLessThan(1e-8);
    expect(given.criterion).toBeCloseTo(chosen.criterion, 7);
    expect(given.edf).toBeCloseTo(chosen.edf, 6);
    expect(largestDifference(given.covariance, chosen.covariance)).toBeLessThan(1e-8);
  });
});

describe.each(exact)("Of a %s model with two penalties", (family) => {
  const pairs: [string, TermSpec[]][] = [
    ["two curves", [...everyKind.smooth, ...everyKind.circle]],
    ["a curve and a slowly moving level", [...everyKind.smooth, ...everyKind["random walk"]]],
    ["a curve and levels of groups", everyKind["random effect"]],
    ["a curve and slopes of groups", everyKind["random slope"]],
  ];

  it.each(pairs)("the criterion's second derivatives are those of differences, its first ones nothing: %s", (_name, terms) => {
    const chosen = fitModel(modelOf(family, withPenalties(terms, ["auto", "auto"])), rows);
    const [first, second] = penaltiesOf(chosen).map(Math.log);
    const at = (left: number, right: number) => fitModel(modelOf(family, withPenalties(terms, [within(Math.exp(first + left)), within(Math.exp(second + right))])), rows).criterion;
    const step = 0.02;
    const middle = at(0, 0);
    const hessian = chosen.information?.criterionHessian ?? new Float64Array(4);
    const bend = (left: number, right: number) => (at(left, right) - 2 * middle + at(-left, -right)) / step ** 2;
    const mixed = (at(step, step) - at(step, -step) - at(-step, step) + at(-step, -step)) / (4 * step ** 2);
    const isInside = [first, second].every((value) => value < 30);
    if (isInside) {
      expect(Math.abs((at(step, 0) - at(-step, 0)) / (2 * step))).toBeLessThan(1e-3);
      expect(Math.abs((at(0, step) - at(0, -step)) / (2 * step))).toBeLessThan(1e-3);
    }
    expect(Math.abs(bend(step, 0) - hessian[0])).toBeLessThan(2e-3);
    expect(Math.abs(bend(0, step) - hessian[3])).toBeLessThan(2e-3);
    expect(Math.abs(mixed - hessian[1])).toBeLessThan(2e-3);
    expect(hessian[1]).toBeCloseTo(hessian[2], 10);
  });
});

describe.each(families.filter((family) => family !== "negative-binomial" && family !== "binomial"))("Weights in another unit, %s", (family) => {
  it.each(Object.entries(everyKind))("multiply the dispersion, and change nothing else, penalties chosen: %s", (_name, terms) => {
    const spec = modelOf(family, terms.map((term) => ("smoothness" in term ? { ...term, smoothness: "auto" as const } : term)), { weights: "weight" });
    const fit = (unit: number) => fitModel(spec, { ...rows, weight: numbers.map((row) => unit * (1 + (row % 3))) });
    const [one, other] = [fit(1), fit(1000)];
    // A lognormal's mean knows the dispersion.
    if (family !== "log-gaussian") expect(largestRelativeDifference(other.fitted, one.fitted)).toBeLessThan(3e-5);
    expect(other.edf).toBeCloseTo(one.edf, 3);
    expect(other.dispersion / one.dispersion).toBeCloseTo(1000, 1);
    expect(largestDifference(other.covariance.map(Math.abs), one.covariance.map(Math.abs))).toBeLessThan(1e-3 * Math.max(...one.covariance));
  });
});

describe("Rows given twice, penalties chosen", () => {
  it.each(exact)("are not rows of weight two: %s models have more of them to choose by", (family) => {
    const spec = modelOf(family, withPenalties(everyKind.smooth, ["auto"]));
    const twice = fitModel(spec, inOrder(rows, [...numbers, ...numbers]));
    const heavy = fitModel({ ...spec, weights: "weight" }, { ...rows, weight: numbers.map(() => 2) });
    expect(twice.rowCount).toBe(200);
    expect(twice.criterion).not.toBeCloseTo(heavy.criterion, 3);
    expect(twice.dispersion).toBeLessThan(heavy.dispersion);
  });
});
