import { fitModel, predict, termCurve, termSurface } from "@shared/engine";
import type { ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { gaussianSpec, rowsForEveryKind, salesRows } from "./support/sales-rows";

const rows = rowsForEveryKind(40);
const models = (...terms: TermSpec[]): ModelSpec => ({ response: "logUnits", family: "gaussian", terms });
const price: TermSpec = { kind: "smooth", column: "price", size: 6 };
const perStore: TermSpec = { kind: "factor-smooth", column: "price", group: "store", size: 4 };
const walk: TermSpec = { kind: "random-walk", column: "week" };
const surface: TermSpec = { kind: "tensor-product", columns: ["price", "depth"] };

describe("Predicting refuses, by name and rule,", () => {
  const history = salesRows(5);
  const model = fitModel(gaussianSpec, history);
  const next = { price: [1.5], yearFraction: [0.5], temperature: [12], promotion: ["none"] };
  const seen = [...new Set(history.promotion)].sort().map((level) => `"${level}"`).join(", ");
  const cases: { rule: string; attempt: () => unknown; code: string; message: string }[] = [
    {
      rule: "a level never seen", attempt: () => predict(model, { ...next, promotion: ["coupon"] }), code: "level-unknown",
      message: `Level "coupon" of factor "promotion" (row 1) was never seen in the fit; seen were ${seen}.`,
    },
    {
      rule: "a missing column", attempt: () => predict(model, { price: [1] }), code: "column-missing",
      message: 'Column "yearFraction" (cyclic-smooth) is missing; the data has "price".',
    },
    {
      rule: "a price that is not a number", attempt: () => predict(model, { ...next, price: [Number.NaN] }), code: "value-not-finite",
      message: 'Column "price" (smooth) must be finite; row 1 is NaN.',
    },
    {
      rule: "a certain interval", attempt: () => predict(model, next, { level: 1 }), code: "option-invalid",
      message: "level is 1; it must be above 0 and below 1.",
    },
    {
      rule: "an interval of another kind", attempt: () => predict(model, next, JSON.parse('{"interval":"total"}') as object), code: "option-invalid",
      message: 'interval is "total"; it must be "mean" or "observation".',
    },
    {
      rule: "a curve of no term", attempt: () => termCurve(model, "depth"), code: "term-unknown",
      message: 'The model has no term "depth"; it has "price", "yearFraction", "promotion", "temperature".',
    },
    {
      rule: "a curve of one point", attempt: () => termCurve(model, "price", { points: 1 }), code: "option-invalid",
      message: "points is 1; it must be a whole number from 2 to 100000.",
    },
    {
      rule: "a curve at a word", attempt: () => termCurve(model, "price", { at: ["cheap"] }), code: "option-invalid",
      message: 'at holds "cheap"; term "price" needs numbers.',
    },
    {
      rule: "a curve at a negative price", attempt: () => termCurve(model, "price", { at: [-1] }), code: "value-not-positive",
      message: 'Column "price" (smooth, log) must be above 0 to have a logarithm; row 1 is -1.',
    },
  ];

  it.each(cases)("$rule", ({ attempt, code, message }) => {
    expect(attempt).toThrow(expect.objectContaining({ name: "EngineError", code, message }));
  });
});

describe("Asking a fitted model refuses, by name and rule,", () => {
  const levelled = fitModel(models({ kind: "factor", column: "brand" }, { ...price, by: "brand" } as TermSpec), rows);
  const shares = fitModel({ ...models(price), response: "share", family: "binomial" }, rows);
  const walking = fitModel(models(walk), rows);
  const grouped = fitModel(models(price, perStore, surface), rows);
  const asks: { rule: string; attempt: () => unknown; code: string; message: string }[] = [
    {
      rule: "a new row's interval of a share", attempt: () => predict(shares, rows, { interval: "observation" }), code: "option-invalid",
      message: 'interval is "observation"; for binomial only the interval of the mean exists ("mean").',
    },
    {
      rule: "a level never seen of a curve per level", attempt: () => predict({ ...levelled, terms: levelled.terms.slice(1) }, { price: [1.5], brand: ["other"] }), code: "level-unknown",
      message: 'Level "other" of factor "brand" (row 1) was never seen in the fit; seen were "own", "rival".',
    },
    {
      rule: "weeks too far ahead", attempt: () => predict(walking, { week: [41, 561] }), code: "value-out-of-range",
      message: 'Column "week" (random-walk): row 2 is 561, 521 weeks from those fitted to (1 to 40); a level is carried on for at most 520.',
    },
    {
      rule: "weeks too far back", attempt: () => predict(walking, { week: [-520] }), code: "value-out-of-range",
      message: 'Column "week" (random-walk): row 1 is -520, 521 weeks from those fitted to (1 to 40); a level is carried on for at most 520.',
    },
    {
      rule: "half a week ahead", attempt: () => predict(walking, { week: [41.5] }), code: "column-kind",
      message: 'Column "week" (random-walk) must hold whole numbers of weeks; row 1 is 41.5.',
    },
    {
      rule: "one of several curves unnamed", attempt: () => termCurve(grouped, "price:store"), code: "option-invalid",
      message: 'Term "price:store" has several curves; name one by group: "east", "north", "south", "west".',
    },
    {
      rule: "a curve of no group", attempt: () => termCurve(grouped, "price:store", { group: "centre" }), code: "level-unknown",
      message: 'Term "price:store" has no curve for "centre"; it has "east", "north", "south", "west".',
    },
    {
      rule: "a group of a term with one curve", attempt: () => termCurve(grouped, "price", { group: "east" }), code: "option-invalid",
      message: 'group is "east"; term "price" has one curve only.',
    },
    {
      rule: "a surface as a curve", attempt: () => termCurve(grouped, "price:depth"), code: "option-invalid",
      message: 'Term "price:depth" is a surface over two columns, not a curve; ask for its surface.',
    },
    {
      rule: "a curve as a surface", attempt: () => termSurface(grouped, "price"), code: "option-invalid",
      message: 'Term "price" is a smooth, not a surface over two columns; ask for its curve.',
    },
    {
      rule: "a surface too fine", attempt: () => termSurface(grouped, "price:depth", { points: 301 }), code: "option-invalid",
      message: "points is 301; it must be a whole number from 2 to 300.",
    },
  ];

  it.each(asks)("$rule", ({ attempt, code, message }) => {
    expect(attempt).toThrow(expect.objectContaining({ name: "EngineError", code, message }));
  });
});
