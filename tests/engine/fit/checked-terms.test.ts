import type { ModelSpec, Smoothness, TermSpec } from "@shared/engine";
import { checkSmoothness, checkVaryingDegrees } from "@shared/engine/fit/check-smoothness";
import { checkSpec } from "@shared/engine/fit/check-spec";
import { checkTerm, requireName } from "@shared/engine/fit/check-term";
import { checkDetermined } from "@shared/engine/fit/row-budget";
import { describe, expect, it } from "vitest";
import { everyKind } from "../support/every-kind-rows";

type Penalised = Parameters<typeof checkSmoothness>[0];
const smooth = (smoothness: unknown, change: object = {}): Penalised => ({ kind: "smooth", column: "price", smoothness: smoothness as Smoothness, ...change } as Penalised);
const refusal = (code: string, message: string) => expect.objectContaining({ name: "EngineError", code, message }) as Error;

describe("Smoothness is refused, by its value and its rule,", () => {
  it.each<[Penalised, string]>([
    [smooth({ penalty: 9.9e-13 }), 'Term "p": penalty is 9.9e-13; it must be from 1e-12 to 1e15.'],
    [smooth({ penalty: 1.1e15 }), 'Term "p": penalty is 1100000000000000; it must be from 1e-12 to 1e15.'],
    [smooth({ penalty: Number.NaN }), 'Term "p": penalty is NaN; it must be from 1e-12 to 1e15.'],
    [smooth({ penalty: Infinity }), 'Term "p": penalty is Infinity; it must be from 1e-12 to 1e15.'],
    [smooth({ penalty: "much" }), 'Term "p": penalty is much; it must be from 1e-12 to 1e15.'],
    [smooth({ df: 1 }), 'Term "p": df is 1; it must be above 1 and below 9 (size - 1).'],
    [smooth({ df: 9 }), 'Term "p": df is 9; it must be above 1 and below 9 (size - 1).'],
    [smooth({ df: 5 }, { size: 6 }), 'Term "p": df is 5; it must be above 1 and below 5 (size - 1).'],
    [smooth({ df: Number.NaN }), 'Term "p": df is NaN; it must be above 1 and below 9 (size - 1).'],
    [smooth({ df: 10_000 }, { by: "store" }), 'Term "p": df is 10000; it must be above 1 and below 10000 (of all its curves).'],
    [{ kind: "cyclic-smooth", column: "season", period: [0, 1], smoothness: { df: 0 } }, 'Term "p": df is 0; it must be above 0 and below 11 (size - 1).'],
    [{ kind: "cyclic-smooth", column: "season", period: [0, 1], size: 8, smoothness: { df: 7 } }, 'Term "p": df is 7; it must be above 0 and below 7 (size - 1).'],
    [{ kind: "tensor-product", columns: ["price", "week"], smoothness: { df: 16 } }, 'Term "p": df is 16; it must be above 1 and below 16 ((size - 1) of one column times (size - 1) of the other).'],
    [{ kind: "tensor-product", columns: ["price", "week"], sizes: [4, 7], smoothness: { df: 18 } }, 'Term "p": df is 18; it must be above 1 and below 18 ((size - 1) of one column times (size - 1) of the other).'],
  ])("%j", (term, message) => {
    expect(() => checkSmoothness(term, "p")).toThrow(refusal("smoothness-out-of-range", message));
  });

  it.each<[Penalised, string]>([
    [smooth("some"), 'Term "p": smoothness is "some"; it must be "auto", { df } or { penalty }.'],
    [smooth(null), 'Term "p": smoothness is null; it must be "auto", { df } or { penalty }.'],
    [smooth(4), 'Term "p": smoothness is 4; it must be "auto", { df } or { penalty }.'],
    [smooth({ edf: 4 }), 'Term "p": smoothness is {"edf":4}; it must be "auto", { df } or { penalty }.'],
    [{ kind: "random-effect", column: "store", smoothness: { df: 2 } }, 'Term "p": smoothness is {"df":2}; a random-effect takes "auto" or { penalty }, since its degrees of freedom depend on the data.'],
    [{ kind: "factor-smooth", column: "price", group: "store", smoothness: { df: 2 } }, 'Term "p": smoothness is {"df":2}; a factor-smooth takes "auto" or { penalty }, since its degrees of freedom depend on the data.'],
  ])("%j", (term, message) => {
    expect(() => checkSmoothness(term, "p")).toThrow(refusal("spec-invalid", message));
  });

  it.each<[number | null, number, string]>([
    [null, 2, 'Term "p": df is 2; it must be above 2 and below 8 (size; its constant counts).'],
    [null, 8, 'Term "p": df is 8; it must be above 2 and below 8 (size; its constant counts).'],
    [3, 3, 'Term "p": df is 3; it must be above 3 and below 21 (size - 1 for each of 3 curves together).'],
    [3, 21, 'Term "p": df is 21; it must be above 3 and below 21 (size - 1 for each of 3 curves together).'],
  ])("of a curve that varies, by %s levels: df %d", (levels, df, message) => {
    expect(() => checkVaryingDegrees({ kind: "smooth", column: "price", size: 8, by: "store", smoothness: { df } }, "p", levels)).toThrow(refusal("smoothness-out-of-range", message));
  });

  it.each<Penalised>([
    smooth(undefined), smooth("auto"), smooth({ penalty: 1e-12 }), smooth({ penalty: 1e15 }), smooth({ df: 1.0001 }), smooth({ df: 8.9999 }), smooth({ df: 9999 }, { by: "store" }),
    { kind: "cyclic-smooth", column: "season", period: [0, 1], smoothness: { df: 1e-3 } }, { kind: "random-walk", column: "week", smoothness: { penalty: 3 } },
    { kind: "tensor-product", columns: ["price", "week"], smoothness: { df: 15.9 } },
  ])("but taken: %j", (term) => {
    expect(() => checkSmoothness(term, "p")).not.toThrow();
    expect(() => checkVaryingDegrees({ kind: "smooth", column: "price", by: "store" }, "p", 4)).not.toThrow();
  });
});

describe("A term by itself is refused", () => {
  it.each<[string, string]>([
    ["{}", "Term kind missing is not one of linear, factor, smooth, cyclic-smooth, natural-spline, local-regression, tensor-product, random-walk, random-effect, factor-smooth."],
    ['"linear"', "Term kind missing is not one of linear, factor, smooth, cyclic-smooth, natural-spline, local-regression, tensor-product, random-walk, random-effect, factor-smooth."],
    ['{"kind":["linear"],"column":"price"}', 'Term kind ["linear"] is not one of linear, factor, smooth, cyclic-smooth, natural-spline, local-regression, tensor-product, random-walk, random-effect, factor-smooth.'],
    ['{"kind":"smooth","column":7}', "column of a smooth term is 7; it must be a column name."],
    ['{"kind":"smooth","column":""}', 'column of a smooth term is ""; it must be a column name.'],
    ['{"kind":"smooth","column":"price","id":""}', 'id of a smooth term is ""; it must be a column name.'],
    ['{"kind":"smooth","column":"price","by":["store"]}', 'by of a smooth term is ["store"]; it must be a column name.'],
    ['{"kind":"factor-smooth","column":"price","group":null}', "group of a factor-smooth term is null; it must be a column name."],
    ['{"kind":"natural-spline","column":"price","df":0}', 'Term "price": df is 0; it must be a whole number from 1 to 100.'],
    ['{"kind":"natural-spline","column":"price","df":101}', 'Term "price": df is 101; it must be a whole number from 1 to 100.'],
    ['{"kind":"natural-spline","column":"price","df":"3"}', 'Term "price": df is "3"; it must be a whole number from 1 to 100.'],
    ['{"kind":"local-regression","column":"price"}', 'Term "price": span is missing; it must be above 0 and at most 1.'],
    ['{"kind":"local-regression","column":"price","span":-0.1}', 'Term "price": span is -0.1; it must be above 0 and at most 1.'],
    ['{"kind":"local-regression","column":"price","span":1,"degree":1.5}', 'Term "price": degree is 1.5; it must be 0, 1 or 2.'],
    ['{"kind":"smooth","column":"price","shape":true}', 'Term "price": shape is true; it must be "decreasing" or "increasing".'],
    ['{"kind":"tensor-product","columns":["price","week"],"sizes":[5]}', 'Term "price:week": sizes is [5]; it must be two whole numbers.'],
    ['{"kind":"tensor-product","columns":["price","week","depth"]}', 'columns of a tensor-product term is ["price","week","depth"]; it must be two column names.'],
  ])("%s", (text, message) => {
    expect(() => checkTerm(JSON.parse(text) as TermSpec)).toThrow(refusal("spec-invalid", message));
  });

  it.each(Object.values(everyKind).flat())("but taken: %j", (term) => {
    expect(() => checkTerm(term)).not.toThrow();
  });

  it("by its role where a name is none", () => {
    expect(() => requireName(undefined, "response")).toThrow(refusal("spec-invalid", "response is missing; it must be a column name."));
    expect(() => requireName("units", "response")).not.toThrow();
  });
});

describe("A specification is refused", () => {
  const spec = (change: object): ModelSpec => ({ response: "y", family: "gaussian", terms: [], ...change });

  it.each<[object, string]>([
    [{ response: undefined }, "response is missing; it must be a column name."],
    [{ offset: 0 }, "offset is 0; it must be a column name."],
    [{ weights: "" }, 'weights is ""; it must be a column name.'],
    [{ terms: {} }, "terms must be a list of terms."],
    [{ terms: [{ kind: "linear", column: "offset" }] }, 'Term id "offset" is reserved; give the term another id.'],
    [{ terms: [{ kind: "linear", column: "price" }, { kind: "smooth", column: "depth", id: "price" }] }, 'Two terms have the id "price"; give one of them another id.'],
  ])("%j", (change, message) => {
    expect(() => checkSpec(spec(change))).toThrow(refusal("spec-invalid", message));
  });
});

describe("What rows leave undetermined", () => {
  it("is refused by the names of all terms where no criterion is finite", () => {
    expect(() => checkDetermined(Infinity, 12, ["price", "week"])).toThrow(refusal(
      "too-few-rows", '12 rows (of weight above 0) leave the terms "price", "week" undetermined together, whatever their penalties; leave one out or give it fewer degrees of freedom.',
    ));
    expect(() => checkDetermined(Number.NaN, 12, ["price"])).toThrow("undetermined together");
    expect(() => checkDetermined(-1e300, 12, ["price"])).not.toThrow();
  });
});
