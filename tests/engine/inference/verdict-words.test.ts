import { fitModel } from "@shared/engine";
import type { FittedModel, TermSpec } from "@shared/engine";
import { comparisonVerdict } from "@shared/engine/inference/comparison-verdict";
import { describe, expect, it } from "vitest";
import { everyKindRows, modelOf } from "../support/every-kind-rows";

const rows = everyKindRows(5, 60);
const fit = (terms: readonly TermSpec[]): FittedModel => fitModel(modelOf("gaussian", terms), rows);
const line: TermSpec = { kind: "linear", column: "price" };
const curve: TermSpec = { kind: "smooth", column: "price" };
const promotion: TermSpec = { kind: "factor", column: "promotion" };
const store: TermSpec = { kind: "random-effect", column: "store" };
const found = { degreesOfFreedom: 2, isPerfect: false };

describe("A verdict names what the larger model has more", () => {
  it.each<[TermSpec[], TermSpec[], string]>([
    [[], [{ kind: "linear", column: "depth" }], '"depth"'],
    [[], [promotion], '"promotion"'],
    [[], [curve], 'The curve "price"'],
    [[], [{ ...curve, id: "own price" } as TermSpec], 'The curve "own price"'],
    [[], [{ kind: "cyclic-smooth", column: "season", period: [0, 1] }], 'The curve "season"'],
    [[], [{ kind: "natural-spline", column: "price", df: 3 }], 'The curve "price"'],
    [[], [{ kind: "local-regression", column: "price", span: 0.6 }], 'The curve "price"'],
    [[], [{ kind: "tensor-product", columns: ["price", "temperature"] }], 'The interaction of "price" and "temperature"'],
    [[], [{ kind: "random-walk", column: "week" }], 'The moving level "week"'],
    [[], [store], 'A level for each "store"'],
    [[], [{ ...store, by: "depth" } as TermSpec], 'A slope in "depth" for each "store"'],
    [[line], [curve], 'A curve instead of a line in "price"'],
    [[line], [{ kind: "natural-spline", column: "price", df: 3 }], 'A curve instead of a line in "price"'],
    [[{ kind: "linear", column: "week" }], [{ kind: "factor", column: "week" }], 'A level for each value of "week"'],
    [[store], [{ kind: "factor", column: "store" }], 'A level for each "store" without shrinkage'],
    [[curve, store], [curve, { kind: "factor-smooth", column: "price", group: "store" }], 'A curve of "price" for each "store"'],
    [[promotion, curve], [promotion, { ...curve, by: "promotion" } as TermSpec], 'A curve of "price" for each "promotion"'],
    [[promotion], [promotion, { ...curve, by: "promotion" } as TermSpec], 'A curve of "price" for each "promotion"'],
    [[{ ...curve, size: 6 } as TermSpec], [{ ...curve, size: 9 } as TermSpec], 'A finer curve of "price"'],
    [[{ ...curve, shape: "decreasing" } as TermSpec], [curve], 'A curve of "price" of any shape'],
    [[curve], [{ ...curve, smoothness: { penalty: 3 } } as TermSpec], "Another choice of smoothness"],
    [[], [promotion, curve], '"promotion" together with the curve "price"'],
    [[], [promotion, curve, store], '"promotion", the curve "price" together with a level for each "store"'],
  ])("%j, then %j: %s", (smaller, larger, words) => {
    const [one, other] = [fit(smaller), fit(larger)];
    expect(comparisonVerdict(one, other, { ...found, pValue: 0.0312 })).toBe(`${words} is worth it: it explains more than chance would (p = 0.031).`);
    const lower = words[0].toLowerCase() + words.slice(1);
    expect(comparisonVerdict(one, other, { ...found, pValue: 0.4 })).toBe(`No evidence that ${lower} explains more than chance would (p = 0.400): the smaller model will do.`);
  });
});

describe("A verdict is at the 5 % level, by its p-value", () => {
  const [one, other] = [fit([line]), fit([curve])];

  it.each([[0.0009, "p below 0.001"], [0.001, "p = 0.001"], [0.0499, "p = 0.050"], [0, "p below 0.001"]])("worth it at %d", (pValue, words) => {
    expect(comparisonVerdict(one, other, { ...found, pValue })).toBe(`A curve instead of a line in "price" is worth it: it explains more than chance would (${words}).`);
  });

  it.each([[0.05, "p = 0.050"], [1, "p = 1.000"]])("without evidence at %d", (pValue, words) => {
    expect(comparisonVerdict(one, other, { ...found, pValue })).toBe(`No evidence that a curve instead of a line in "price" explains more than chance would (${words}): the smaller model will do.`);
  });

  it("says nothing below half a degree of freedom, nor where nothing is left", () => {
    expect(comparisonVerdict(one, other, { pValue: null, degreesOfFreedom: 0.3127, isPerfect: false })).toBe(
      "The two models differ by less than half a degree of freedom (0.31), too little to compare them this way: read the larger model's test of a curve against a line instead.",
    );
    expect(comparisonVerdict(one, other, { pValue: null, degreesOfFreedom: 4, isPerfect: true })).toBe("The larger model reproduces the response exactly, so nothing is left to judge it by.");
  });

  it.each([[false, true], [true, false], [false, false]])("adds a word of care where a fit did not come to rest (converged: %s and %s)", (first, second) => {
    for (const finding of [{ ...found, pValue: 0.01 }, { ...found, pValue: 0.5 }, { ...found, pValue: null }, { ...found, pValue: null, isPerfect: true }]) {
      const verdict = comparisonVerdict({ ...one, converged: first }, { ...other, converged: second }, finding);
      expect(verdict.endsWith(" One of the two fits did not come to rest, so take this with care.")).toBe(true);
      expect(comparisonVerdict(one, other, finding)).toBe(verdict.slice(0, -" One of the two fits did not come to rest, so take this with care.".length));
    }
  });
});
