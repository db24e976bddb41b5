import { fitModel } from "@shared/engine";
import type { FitOptions, ModelData, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { quasiPoissonSpec, salesRows } from "./support/sales-rows";

const rows = salesRows(5, 12);
const with_ = (change: ModelData): ModelData => ({ ...rows, ...change });
const without = (name: string): ModelData => Object.fromEntries(Object.entries(rows).filter(([column]) => column !== name));
const at = <Value>(column: readonly Value[], row: number, value: Value): Value[] => column.map((old, k) => (k === row ? value : old));
const only = (term: TermSpec, change: Partial<ModelSpec> = {}): ModelSpec => ({ response: "logUnits", family: "gaussian", terms: [term], ...change });
/** What JSON from outside may hold whatever the types say. */
const untyped = (text: string): ModelSpec => JSON.parse(text) as ModelSpec;
const untypedTerm = (text: string): ModelSpec => only(JSON.parse(text) as TermSpec);

type Case = { rule: string; spec: ModelSpec; data?: ModelData; options?: FitOptions; code: string; message: string };

const price: TermSpec = { kind: "smooth", column: "price", size: 8 };

const fitCases: Case[] = [
  {
    rule: "a missing response", spec: only(price), data: without("logUnits"), code: "column-missing",
    message: 'Column "logUnits" (response) is missing; the data has "price", "yearFraction", "temperature", "promotion", "units".',
  },
  {
    rule: "a missing covariate", spec: only(price), data: { logUnits: [1, 2, 3] }, code: "column-missing",
    message: 'Column "price" (smooth) is missing; the data has "logUnits".',
  },
  {
    rule: "unequal lengths", spec: only(price), data: with_({ price: [1, 2, 3] }), code: "length-mismatch",
    message: 'Column "price" has 3 rows, "logUnits" has 12; all columns must have the same length.',
  },
  {
    rule: "no rows", spec: only(price), data: { logUnits: [], price: [] }, code: "too-few-rows",
    message: "The data has 0 rows of weight above 0; a fit needs at least 2.",
  },
  {
    rule: "a response that is not a number", spec: only(price), data: with_({ logUnits: at(rows.logUnits, 2, Number.NaN) }), code: "value-not-finite",
    message: 'Column "logUnits" (response) must be finite; row 3 is NaN.',
  },
  {
    rule: "an infinite covariate", spec: only(price), data: with_({ price: at(rows.price, 11, -Infinity) }), code: "value-not-finite",
    message: 'Column "price" (smooth) must be finite; row 12 is -Infinity.',
  },
  {
    rule: "a number beyond reason", spec: only(price), data: with_({ price: at(rows.price, 0, 1e60) }), code: "value-not-finite",
    message: 'Column "price" (smooth) must be within 1e+50 of 0; row 1 is 1e+60.',
  },
  {
    rule: "text where numbers are needed", spec: only({ kind: "linear", column: "promotion" }), data: with_({ promotion: rows.price.map(() => "none") }), code: "column-kind",
    message: 'Column "promotion" (linear) must hold numbers; row 1 is "none".',
  },
  {
    rule: "a factor level that is not a number", spec: only({ kind: "factor", column: "deal" }), data: with_({ deal: at(rows.price, 4, Number.NaN) }), code: "value-not-finite",
    message: 'Column "deal" (factor) must be finite; row 5 is NaN.',
  },
  {
    rule: "a price of zero under a logarithm", spec: only({ ...price, log: true }), data: with_({ price: at(rows.price, 1, 0) }), code: "value-not-positive",
    message: 'Column "price" (smooth, log) must be above 0 to have a logarithm; row 2 is 0.',
  },
  {
    rule: "a negative count", spec: { ...quasiPoissonSpec, terms: [price] }, data: with_({ units: at(rows.units, 3, -2) }), code: "response-invalid",
    message: 'Response "units" must not be negative for quasi-poisson; row 4 is -2.',
  },
  {
    rule: "counts of nothing but zero", spec: { ...quasiPoissonSpec, terms: [price] }, data: with_({ units: rows.units.map(() => 0) }), code: "response-invalid",
    message: 'Response "units" is 0 in every row; quasi-poisson needs a value above 0.',
  },
  {
    rule: "a zero under log-gaussian", spec: only(price, { response: "units", family: "log-gaussian" }), data: with_({ units: at(rows.units, 6, 0) }), code: "response-invalid",
    message: 'Response "units" must be above 0 for log-gaussian; row 7 is 0.',
  },
  {
    rule: "a constant column under a curve", spec: only(price), data: with_({ price: rows.price.map(() => 1.99) }), code: "column-constant",
    message: 'Term "price": column "price" is constant (1.99); a curve needs values that vary.',
  },
  {
    rule: "fewer than four distinct values", spec: only(price), data: with_({ price: rows.price.map((_, row) => 1 + (row % 3)) }), code: "column-few-values",
    message: 'Term "price": column "price" has 3 distinct values; a curve needs at least 4. Use a straight line or a factor.',
  },
  {
    rule: "fewer than four distinct values on a circle",
    spec: only({ kind: "cyclic-smooth", column: "yearFraction", period: [0, 1] }), data: with_({ yearFraction: rows.price.map((_, row) => (row % 2) / 2) }), code: "column-few-values",
    message: 'Term "yearFraction": column "yearFraction" has 2 distinct values; a curve needs at least 4. Use a straight line or a factor.',
  },
  {
    rule: "a reference that is no level", spec: only({ kind: "factor", column: "deal", reference: "2" }), data: with_({ deal: rows.price.map((_, row) => row % 2) }), code: "level-unknown",
    message: 'Reference level "2" of factor "deal" is not among its levels "0", "1".',
  },
  {
    rule: "negative weights", spec: only(price, { weights: "weight" }), data: with_({ weight: at(rows.price, 5, -1) }), code: "weights-invalid",
    message: 'Column "weight" (weights) must not be negative; row 6 is -1.',
  },
  {
    rule: "weights all but zero", spec: only(price, { weights: "weight" }), data: with_({ weight: at(rows.price, 5, 1e-60) }), code: "weights-invalid",
    message: 'Column "weight" (weights) must be 0 or at least 1e-50; row 6 is 1e-60.',
  },
  {
    rule: "weights of nothing but zero", spec: only(price, { weights: "weight" }), data: with_({ weight: rows.price.map(() => 0) }), code: "too-few-rows",
    message: "The data has 0 rows of weight above 0; a fit needs at least 2.",
  },
  {
    rule: "more unpenalised coefficients than rows", spec: only({ kind: "factor", column: "level" }), data: with_({ level: rows.price.map((_, row) => row) }), code: "too-few-rows",
    message: "12 rows (of weight above 0) cannot carry 12 unpenalised coefficients; at least 13 are needed.",
  },
  {
    rule: "a size too small", spec: only({ ...price, size: 3 }), code: "spec-invalid",
    message: 'Term "price": size is 3; it must be a whole number from 4 to 200.',
  },
  {
    rule: "one degree of freedom for a curve", spec: only({ ...price, smoothness: { df: 1 } }), code: "smoothness-out-of-range",
    message: 'Term "price": df is 1; it must be above 1 and below 7 (size - 1).',
  },
  {
    rule: "as many degrees of freedom as a circle has", spec: only({ kind: "cyclic-smooth", column: "yearFraction", period: [0, 1], smoothness: { df: 11 } }), code: "smoothness-out-of-range",
    message: 'Term "yearFraction": df is 11; it must be above 0 and below 11 (size - 1).',
  },
  {
    rule: "more degrees of freedom than distinct values",
    spec: only({ ...price, smoothness: { df: 6 } }), data: with_({ price: rows.price.map((_, row) => 1 + (row % 4)) }), code: "smoothness-out-of-range",
    message: 'Term "price": df is 6, which these data cannot give; the nearest the term comes to is 3.00.',
  },
  {
    rule: "a negative penalty", spec: only({ ...price, smoothness: { penalty: -1 } }), code: "smoothness-out-of-range",
    message: 'Term "price": penalty is -1; it must be from 1e-12 to 1e15.',
  },
  {
    rule: "a smoothness that is none", spec: untypedTerm('{"kind":"smooth","column":"price","smoothness":"some"}'), code: "spec-invalid",
    message: 'Term "price": smoothness is "some"; it must be "auto", { df } or { penalty }.',
  },
  {
    rule: "a period that is none", spec: untypedTerm('{"kind":"cyclic-smooth","column":"yearFraction","period":[1,0]}'), code: "spec-invalid",
    message: 'Term "yearFraction": period is [1,0]; it must be two finite numbers, the second larger.',
  },
  {
    rule: "two terms of one name", spec: only(price, { terms: [price, { kind: "linear", column: "price" }] }), code: "spec-invalid",
    message: 'Two terms have the id "price"; give one of them another id.',
  },
  {
    rule: "a reserved name", spec: only({ ...price, id: "intercept" }), code: "spec-invalid",
    message: 'Term id "intercept" is reserved; give the term another id.',
  },
  {
    rule: "a kind that is none", spec: untypedTerm('{"kind":"wavelet","column":"price"}'), code: "spec-invalid",
    message: 'Term kind "wavelet" is not one of linear, factor, smooth, cyclic-smooth, natural-spline, local-regression, tensor-product, random-walk, random-effect, factor-smooth.',
  },
  {
    rule: "a term that is none", spec: untyped('{"response":"logUnits","family":"gaussian","terms":[null]}'), code: "spec-invalid",
    message: "Term kind missing is not one of linear, factor, smooth, cyclic-smooth, natural-spline, local-regression, tensor-product, random-walk, random-effect, factor-smooth.",
  },
  {
    rule: "terms that are no list", spec: untyped('{"response":"logUnits","family":"gaussian"}'), code: "spec-invalid",
    message: "terms must be a list of terms.",
  },
  {
    rule: "a column without a name", spec: untypedTerm('{"kind":"linear"}'), code: "spec-invalid",
    message: "column of a linear term is missing; it must be a column name.",
  },
  {
    rule: "a family that is none", spec: untyped('{"response":"logUnits","family":"cauchy","terms":[]}'), code: "spec-invalid",
    message: 'Family "cauchy" is not one of gaussian, log-gaussian, quasi-poisson, negative-binomial, binomial.',
  },
  {
    rule: "no iterations", spec: { ...quasiPoissonSpec, terms: [price] }, options: { maxIterations: 0 }, code: "option-invalid",
    message: "maxIterations is 0; it must be a whole number of at least 1.",
  },
];

describe("Fitting refuses, by name and rule,", () => {
  it.each(fitCases)("$rule", ({ spec, data, options, code, message }) => {
    expect(() => fitModel(spec, data ?? rows, options)).toThrow(expect.objectContaining({ name: "EngineError", code, message }));
  });
});
