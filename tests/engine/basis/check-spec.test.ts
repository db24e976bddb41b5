import { describe, expect, it } from "vitest";
import type { ModelData, ModelSpec, TermSpec } from "@shared/engine";
import { checkSpec } from "@shared/engine/fit/check-spec";

const spec = (...terms: TermSpec[]): ModelSpec => ({ response: "units", family: "gaussian", terms });
/** What JSON from outside may hold whatever the types say. */
const untyped = (text: string): ModelSpec => spec(JSON.parse(text) as TermSpec);
const price: TermSpec = { kind: "smooth", column: "price", size: 8 };
const curves: TermSpec = { kind: "factor-smooth", column: "price", group: "store" };
const data: ModelData = { price: [1, 2], depth: [0, 0.2], brand: ["a", "b"] };

type Case = { rule: string; spec: ModelSpec; data?: ModelData; code?: string; message: string };

const cases: Case[] = [
  { rule: "a natural spline without df", spec: untyped('{"kind":"natural-spline","column":"price"}'), message: 'Term "price": df is missing; it must be a whole number from 1 to 100.' },
  { rule: "half a degree of freedom", spec: spec({ kind: "natural-spline", column: "price", df: 2.5 }), message: 'Term "price": df is 2.5; it must be a whole number from 1 to 100.' },
  { rule: "a span of nothing", spec: spec({ kind: "local-regression", column: "price", span: 0 }), message: 'Term "price": span is 0; it must be above 0 and at most 1.' },
  { rule: "a span of more than all", spec: spec({ kind: "local-regression", column: "price", span: 1.5 }), message: 'Term "price": span is 1.5; it must be above 0 and at most 1.' },
  { rule: "a span in words", spec: untyped('{"kind":"local-regression","column":"price","span":"half"}'), message: 'Term "price": span is "half"; it must be above 0 and at most 1.' },
  { rule: "a cubic local polynomial", spec: untyped('{"kind":"local-regression","column":"price","span":0.5,"degree":3}'), message: 'Term "price": degree is 3; it must be 0, 1 or 2.' },
  { rule: "a tensor product of one column", spec: untyped('{"kind":"tensor-product","columns":["price"]}'), message: 'columns of a tensor-product term is ["price"]; it must be two column names.' },
  { rule: "a tensor product without columns", spec: untyped('{"kind":"tensor-product"}'), message: "columns of a tensor-product term is missing; it must be two column names." },
  { rule: "a tensor product of a number", spec: untyped('{"kind":"tensor-product","columns":["price",2]}'), message: "a column of a tensor-product term is 2; it must be a column name." },
  { rule: "a tensor product of a column with itself", spec: spec({ kind: "tensor-product", columns: ["price", "price"] }), message: 'A tensor-product term has column "price" twice; its two columns must differ.' },
  { rule: "one size for two columns", spec: untyped('{"kind":"tensor-product","columns":["price","depth"],"sizes":5}'), message: 'Term "price:depth": sizes is 5; it must be two whole numbers.' },
  { rule: "a by without a name", spec: untyped('{"kind":"smooth","column":"price","by":""}'), message: 'by of a smooth term is ""; it must be a column name.' },
  { rule: "a random effect by nothing", spec: untyped('{"kind":"random-effect","column":"store","by":null}'), message: "by of a random-effect term is null; it must be a column name." },
  { rule: "curves of no group", spec: untyped('{"kind":"factor-smooth","column":"price"}'), message: "group of a factor-smooth term is missing; it must be a column name." },
  { rule: "a shape that is none", spec: untyped('{"kind":"smooth","column":"price","shape":"convex"}'), message: 'Term "price": shape is "convex"; it must be "decreasing" or "increasing".' },
  { rule: "a walk without a column", spec: untyped('{"kind":"random-walk"}'), message: "column of a random-walk term is missing; it must be a column name." },
  {
    rule: "degrees of freedom of a random effect", spec: spec({ kind: "random-effect", column: "store", smoothness: { df: 3 } }),
    message: 'Term "store": smoothness is {"df":3}; a random-effect takes "auto" or { penalty }, since its degrees of freedom depend on the data.',
  },
  {
    rule: "degrees of freedom of a random walk", spec: spec({ kind: "random-walk", column: "week", smoothness: { df: 3 } }),
    message: 'Term "week": smoothness is {"df":3}; a random-walk takes "auto" or { penalty }, since its degrees of freedom depend on the data.',
  },
  {
    rule: "degrees of freedom of curves per group", spec: spec(price, { ...curves, smoothness: { df: 3 } }),
    message: 'Term "price:store": smoothness is {"df":3}; a factor-smooth takes "auto" or { penalty }, since its degrees of freedom depend on the data.',
  },
  {
    rule: "more degrees of freedom than a tensor product has", code: "smoothness-out-of-range",
    spec: spec({ kind: "tensor-product", columns: ["price", "depth"], sizes: [5, 6], smoothness: { df: 20 } }),
    message: 'Term "price:depth": df is 20; it must be above 1 and below 20 ((size - 1) of one column times (size - 1) of the other).',
  },
  {
    rule: "one degree of freedom of a tensor product", code: "smoothness-out-of-range",
    spec: spec({ kind: "tensor-product", columns: ["price", "depth"], smoothness: { df: 1 } }),
    message: 'Term "price:depth": df is 1; it must be above 1 and below 16 ((size - 1) of one column times (size - 1) of the other).',
  },
  {
    rule: "a penalty of nothing", code: "smoothness-out-of-range", spec: spec({ kind: "random-walk", column: "week", smoothness: { penalty: 0 } }),
    message: 'Term "week": penalty is 0; it must be from 1e-12 to 1e15.',
  },
  {
    rule: "curves per group without the chain's", spec: spec(curves),
    message: 'Term "price:store" is curves per "store" around a common one; the terms must have a smooth of "price" too.',
  },
  {
    rule: "curves per group whose chain's curve is of the logarithm", spec: spec({ ...price, log: true } as TermSpec, curves),
    message: 'Term "price:store" is curves per "store" around a common one; the terms must have a smooth of "price" too.',
  },
  {
    rule: "curves per group on the log scale beside a curve that is not", spec: spec(price, { ...curves, log: true } as TermSpec),
    message: 'Term "price:store" is curves per "store" around a common one; the terms must have a smooth of "price" (log) too.',
  },
  {
    rule: "a level per group beside curves per group", spec: spec(price, curves, { kind: "random-effect", column: "store" }),
    message: 'Term "store" is a level per "store", which the curves of "price:store" have already; leave it out.',
  },
  {
    rule: "a curve per level without its factor", data, spec: spec({ kind: "smooth", column: "price", by: "brand" }),
    message: 'Term "price:brand" is a curve per level of "brand", each centred; the terms must have the factor "brand" too.',
  },
  {
    rule: "a shape of a curve times numbers", data, spec: spec({ kind: "smooth", column: "price", by: "depth", shape: "decreasing" }),
    message: 'Term "price:depth": shape is "decreasing"; a curve times the numbers of "depth" cannot have one.',
  },
  {
    rule: "fewer degrees of freedom than a curve times numbers has", data, code: "smoothness-out-of-range",
    spec: spec({ kind: "smooth", column: "price", by: "depth", smoothness: { df: 2 } }),
    message: 'Term "price:depth": df is 2; it must be above 2 and below 10 (size; its constant counts).',
  },
  {
    rule: "more degrees of freedom than a curve per level has", data, code: "smoothness-out-of-range",
    spec: spec({ kind: "factor", column: "brand" }, { kind: "smooth", column: "price", size: 8, by: "brand", smoothness: { df: 14 } }),
    message: 'Term "price:brand": df is 14; it must be above 2 and below 14 (size - 1 for each of 2 curves together).',
  },
  {
    rule: "one degree of freedom of a curve that varies", code: "smoothness-out-of-range",
    spec: spec({ kind: "smooth", column: "price", by: "depth", smoothness: { df: 1 } }),
    message: 'Term "price:depth": df is 1; it must be above 1 and below 10000 (of all its curves).',
  },
];

describe("A specification is refused, by name and rule, for", () => {
  it.each(cases)("$rule", ({ spec: wrong, data: columns, code = "spec-invalid", message }) => {
    expect(() => checkSpec(wrong, columns)).toThrow(expect.objectContaining({ name: "EngineError", code, message }));
  });
});

describe("A specification is taken with", () => {
  const brand: TermSpec = { kind: "factor", column: "brand" };
  const taken: [string, ModelSpec][] = [
    ["every kind of term", spec(
      price, curves, { kind: "linear", column: "depth" }, { kind: "factor", column: "promotion" }, { kind: "natural-spline", column: "temperatureC", df: 1 },
      { kind: "local-regression", column: "humidity", span: 1, degree: 0 }, { kind: "tensor-product", columns: ["price", "depth"], smoothness: { df: 8 } },
      { kind: "random-walk", column: "week" }, { kind: "random-effect", column: "region" }, { kind: "random-effect", column: "store", by: "depth" },
      { kind: "cyclic-smooth", column: "yearFraction", period: [0, 1] },
    )],
    ["a shaped curve per level beside its factor", spec(brand, { kind: "smooth", column: "price", by: "brand", shape: "decreasing" })],
    ["a curve times numbers that are no factor", spec({ kind: "smooth", column: "price", by: "depth", smoothness: { df: 4 } })],
    ["a level per group beside another group's curves", spec(price, curves, { kind: "random-effect", column: "region" })],
  ];

  it.each(taken)("%s", (_name, right) => {
    expect(() => checkSpec(right, data)).not.toThrow();
  });
});
