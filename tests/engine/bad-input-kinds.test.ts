import { fitModel } from "@shared/engine";
import type { ModelData, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { rowsForEveryKind, salesRows } from "./support/sales-rows";

const base = salesRows(5, 40);
const rows = rowsForEveryKind(40);
const with_ = (change: ModelData): ModelData => ({ ...rows, ...change });
const at = (name: string, row: number, value: unknown): ModelData => with_({ [name]: Array.from<unknown>(rows[name]).map((old, k) => (k === row ? value : old)) as number[] });
const models = (...terms: TermSpec[]): ModelSpec => ({ response: "logUnits", family: "gaussian", terms });
const price: TermSpec = { kind: "smooth", column: "price", size: 6 };
const perStore: TermSpec = { kind: "factor-smooth", column: "price", group: "store", size: 4 };
const walk: TermSpec = { kind: "random-walk", column: "week" };
const surface: TermSpec = { kind: "tensor-product", columns: ["price", "depth"] };

type Case = { rule: string; spec: ModelSpec; data?: ModelData; code: string; message: string };

const cases: Case[] = [
  {
    rule: "a share above one", spec: { ...models(price), response: "share", family: "binomial" }, data: at("share", 2, 1.5), code: "response-invalid",
    message: 'Response "share" must be from 0 to 1 for binomial; row 3 is 1.5.',
  },
  {
    rule: "a negative count of the negative binomial", spec: { ...models(price), response: "units", family: "negative-binomial" }, data: at("units", 0, -1), code: "response-invalid",
    message: 'Response "units" must not be negative for negative-binomial; row 1 is -1.',
  },
  {
    rule: "counts of nothing but zero of the negative binomial", spec: { ...models(price), response: "units", family: "negative-binomial" }, data: with_({ units: base.units.map(() => 0) }), code: "response-invalid",
    message: 'Response "units" is 0 in every row; negative-binomial needs a value above 0.',
  },
  {
    rule: "half a week", spec: models(walk), data: at("week", 4, 5.5), code: "column-kind",
    message: 'Column "week" (random-walk) must hold whole numbers of weeks; row 5 is 5.5.',
  },
  {
    rule: "a slowly moving level over three weeks", spec: models(walk), data: with_({ week: base.price.map((_, row) => row % 3) }), code: "column-few-values",
    message: 'Term "week": column "week" has 3 distinct values; a curve needs at least 4. Use a straight line or a factor.',
  },
  {
    rule: "more weeks than a level is kept for", spec: models(walk), data: at("week", 0, -1500), code: "spec-invalid",
    message: 'Term "week": column "week" runs from -1500 to 40, 1541 weeks; a random walk has at most 1500.',
  },
  {
    rule: "a column all but constant", spec: models(price), data: with_({ price: base.price.map((own) => own * 1e-60) }), code: "column-constant",
    message: `Term "price": column "price" runs from ${Math.min(...base.price) * 1e-60} to ${Math.max(...base.price) * 1e-60}; a curve needs values at least 1e-50 apart.`,
  },
  {
    rule: "a constant column in a surface", spec: models(surface), data: with_({ depth: base.price.map(() => 0.2) }), code: "column-constant",
    message: 'Term "price:depth": column "depth" is constant (0.2); a curve needs values that vary.',
  },
  {
    rule: "knots that fall on one value", spec: models({ kind: "natural-spline", column: "depth", df: 4 }),
    data: with_({ depth: base.price.map((_, row) => (row < 30 ? 0 : row / 100)) }), code: "column-few-values",
    message: 'Term "depth": with df 4 two knots fall on 0, a value that many rows of column "depth" share; use a smaller df.',
  },
  {
    rule: "a window of too few rows", spec: models({ kind: "local-regression", column: "price", span: 0.05 }), code: "spec-invalid",
    message: 'Term "price": span 0.05 of 40 rows takes the nearest 2; degree 1 needs at least 3.',
  },
  {
    rule: "a window of one value", spec: models({ kind: "local-regression", column: "depth", span: 0.2 }),
    data: with_({ depth: base.price.map((_, row) => (row < 30 ? 0 : row / 100)) }), code: "column-few-values",
    message: 'Term "depth": the nearest 8 rows all have the value 0 of column "depth"; use a larger span.',
  },
  {
    rule: "a local regression of too many rows", spec: models({ kind: "local-regression", column: "price", span: 0.5 }),
    data: { logUnits: Array.from({ length: 2001 }, (_, row) => row % 7), price: Array.from({ length: 2001 }, (_, row) => row) }, code: "spec-invalid",
    message: 'Term "price": a local regression takes up to 2000 rows; the data has 2001. Use a smooth.',
  },
  {
    rule: "a line beside a local regression that draws it", spec: models({ kind: "linear", column: "price", id: "line" }, { kind: "local-regression", column: "price", span: 0.5 }), code: "spec-invalid",
    message: 'Terms "line" and "price" cannot be told apart: a local regression of degree 1 draws straight lines itself. Leave one of them out, or give the local regression degree 0.',
  },
  {
    rule: "a curve of a given shape beside a local regression", spec: models({ ...price, shape: "decreasing" } as TermSpec, { kind: "local-regression", column: "depth", span: 0.8 }), code: "spec-invalid",
    message: 'Term "price" has a shape, which cannot stand beside the local regression "depth"; use a smooth in place of "depth".',
  },
  {
    rule: "groups that are not numbers", spec: models({ kind: "random-effect", column: "week" }), data: at("week", 1, Number.NaN), code: "value-not-finite",
    message: 'Column "week" (random-effect) must be finite; row 2 is NaN.',
  },
  {
    rule: "a slope in words", spec: models({ kind: "random-effect", column: "store", by: "brand" }), code: "column-kind",
    message: 'Column "brand" (random-effect\'s by) must hold numbers; row 1 is "own".',
  },
  {
    rule: "a missing group", spec: models(price, { ...perStore, group: "chain" }), data: rows, code: "column-missing",
    message: 'Column "chain" (factor-smooth) is missing; the data has "price", "yearFraction", "temperature", "promotion", "logUnits", "units", "week", "store", "brand", "depth", "share".',
  },
  {
    rule: "numbers and text in the column that a curve varies by", spec: models({ kind: "factor", column: "brand" }, { ...price, by: "brand" } as TermSpec), data: at("brand", 1, Number.POSITIVE_INFINITY), code: "value-not-finite",
    message: 'Column "brand" (factor) must be finite; row 2 is Infinity.',
  },
  {
    rule: "curves per group without the chain's", spec: models(perStore), code: "spec-invalid",
    message: 'Term "price:store" is curves per "store" around a common one; the terms must have a smooth of "price" too.',
  },
  {
    rule: "a level per group beside curves per group", spec: models(price, perStore, { kind: "random-effect", column: "store" }), code: "spec-invalid",
    message: 'Term "store" is a level per "store", which the curves of "price:store" have already; leave it out.',
  },
  {
    rule: "a curve per level without its factor", spec: models({ ...price, by: "brand" } as TermSpec), code: "spec-invalid",
    message: 'Term "price:brand" is a curve per level of "brand", each centred; the terms must have the factor "brand" too.',
  },
  {
    rule: "a shape of a curve times numbers", spec: models({ ...price, by: "depth", shape: "decreasing" } as TermSpec), code: "spec-invalid",
    message: 'Term "price:depth": shape is "decreasing"; a curve times the numbers of "depth" cannot have one.',
  },
];

describe("Fitting refuses, by name and rule,", () => {
  it.each(cases)("$rule", ({ spec, data, code, message }) => {
    expect(() => fitModel(spec, data ?? rows)).toThrow(expect.objectContaining({ name: "EngineError", code, message }));
  });
});
