import type { Family, ModelSpec, Smoothness, TermSpec } from "@shared/engine";
import fc from "fast-check";

const rarely = <Value, Other>(usual: fc.Arbitrary<Value>, other: fc.Arbitrary<Other>) =>
  fc.oneof({ weight: 9, arbitrary: usual }, { weight: 1, arbitrary: other });
const maybe = <Value>(value: fc.Arbitrary<Value>) => fc.option(value, { nil: undefined });

const smoothness: fc.Arbitrary<Smoothness> = fc.oneof(
  { weight: 6, arbitrary: fc.constant("auto" as const) },
  { weight: 2, arbitrary: fc.record({ df: rarely(fc.double({ min: 1.05, max: 6, noNaN: true }), fc.double({ min: -1, max: 30 })) }) },
  { weight: 2, arbitrary: fc.record({ penalty: rarely(fc.constantFrom(1e-9, 0.01, 1, 50, 1e6, 1e12), fc.double({ min: -1, max: 1e20 })) }) },
);
/** Degrees of freedom of these depend on the data, which they say. */
const ridge = rarely(fc.constantFrom<Smoothness>("auto", { penalty: 0.5 }, { penalty: 1e5 }), smoothness);
const size = rarely(fc.integer({ min: 4, max: 9 }), fc.constantFrom(3, 4.5, 20));
const number = rarely(fc.constantFrom("price", "price", "season", "awkward", "few", "week", "exposure"), fc.constantFrom("promotion", "nowhere"));
const group = rarely(fc.constantFrom("store", "code"), fc.constantFrom("promotion", "few", "nowhere"));
const log = fc.oneof({ weight: 4, arbitrary: fc.constant(false) }, { weight: 1, arbitrary: fc.constant(true) });
const kindOf = <Kind extends TermSpec["kind"]>(kind: Kind) => fc.constant(kind);

const terms: Record<TermSpec["kind"], fc.Arbitrary<TermSpec>> = {
  linear: fc.record({ kind: kindOf("linear"), column: number, log }),
  factor: fc.record({ kind: kindOf("factor"), column: rarely(fc.constantFrom("promotion", "store", "few"), fc.constantFrom("price", "code")), reference: rarely(fc.constant(undefined), fc.constantFrom("none", "absent")) }),
  smooth: fc.record({
    kind: kindOf("smooth"), column: number, log, size, smoothness,
    shape: fc.oneof({ weight: 3, arbitrary: fc.constant(undefined) }, { weight: 1, arbitrary: fc.constantFrom("decreasing" as const, "increasing" as const) }),
    by: fc.oneof({ weight: 4, arbitrary: fc.constant(undefined) }, { weight: 2, arbitrary: fc.constantFrom("promotion", "exposure", "few", "store") }),
  }),
  "cyclic-smooth": fc.record({
    kind: kindOf("cyclic-smooth"), column: fc.oneof({ weight: 3, arbitrary: fc.constant("season") }, { weight: 1, arbitrary: number }), size, smoothness,
    period: rarely(fc.constantFrom<[number, number]>([0, 1], [-3, 40]), fc.constantFrom<[number, number]>([2, 2], [0, Number.NaN])),
  }),
  "natural-spline": fc.record({ kind: kindOf("natural-spline"), column: number, log, df: rarely(fc.integer({ min: 1, max: 5 }), fc.constantFrom(0, 2.5, 40)) }),
  "local-regression": fc.record({
    kind: kindOf("local-regression"), column: number, log, span: rarely(fc.double({ min: 0.3, max: 1, noNaN: true }), fc.constantFrom(0, 0.05, 1.5)),
    degree: maybe(fc.constantFrom(0 as const, 1 as const, 2 as const)),
  }),
  "tensor-product": fc.record({
    kind: kindOf("tensor-product"), columns: fc.tuple(number, number), sizes: maybe(fc.tuple(size, size).map(([left, right]): [number, number] => [Math.min(left, 6), Math.min(right, 6)])), smoothness,
  }),
  "random-walk": fc.record({ kind: kindOf("random-walk"), column: rarely(fc.constant("week"), number), smoothness: ridge }),
  "random-effect": fc.record({ kind: kindOf("random-effect"), column: group, by: maybe(fc.constantFrom("price", "exposure", "promotion")), smoothness: ridge }),
  "factor-smooth": fc.record({ kind: kindOf("factor-smooth"), column: number, log, group, size: fc.constantFrom(4, 5, 6), smoothness: ridge }),
};

/** Most times what a term needs beside it is there: the chain's curve, or the factor of a curve per level. */
const withCompanions = fc.tuple(fc.oneof(...Object.values(terms)), rarely(fc.constant(true), fc.constant(false))).map(([term, isComplete]): TermSpec[] => {
  if (!isComplete) return [term];
  if (term.kind === "factor-smooth") return [{ kind: "smooth", column: term.column, log: term.log, size: 7 }, term];
  if (term.kind === "smooth" && (term.by === "promotion" || term.by === "store")) return [{ kind: "factor", column: term.by }, term];
  return [term];
});

/** The undefined left out, and every term a name of its own, most times. */
const tidied = (list: TermSpec[], isNamed: boolean): TermSpec[] => list.map((term, k) => {
  const given = Object.fromEntries(Object.entries(term).filter(([, value]) => value !== undefined)) as TermSpec;
  return isNamed ? { ...given, id: `${term.kind} ${k + 1}` } : given;
});

const suited: Record<Family, string> = { gaussian: "y", "log-gaussian": "y", "quasi-poisson": "counts", "negative-binomial": "counts", binomial: "share" };

/** Specifications of every kind of term, family and smoothness, most of them possible. */
export const anySpec: fc.Arbitrary<ModelSpec> = fc.record({
  family: fc.constantFrom(...(Object.keys(suited) as Family[])),
  other: rarely(fc.constant(undefined), fc.constantFrom("y", "counts", "share", "promotion", "nowhere")),
  lists: fc.array(withCompanions, { minLength: 0, maxLength: 3 }),
  isNamed: rarely(fc.constant(true), fc.constant(false)),
  offset: fc.oneof({ weight: 4, arbitrary: fc.constant(undefined) }, { weight: 1, arbitrary: fc.constantFrom("exposure", "price") }),
  weights: fc.oneof({ weight: 4, arbitrary: fc.constant(undefined) }, { weight: 1, arbitrary: fc.constantFrom("trials", "price") }),
}).map(({ family, other, lists, isNamed, offset, weights }): ModelSpec => ({
  response: other ?? suited[family], family,
  ...(offset === undefined ? {} : { offset }), ...(weights === undefined ? {} : { weights }),
  terms: tidied(lists.flat(), isNamed),
}));
