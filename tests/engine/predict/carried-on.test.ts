import { covarianceQuadratic, designRows, designTransposeTimes, extendModel, fitModel, predict } from "@shared/engine";
import type { Family, FittedModel, ModelData, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, inOrder, modelOf } from "../support/every-kind-rows";
import { largestDifference, largestRelativeDifference } from "../support/measures";

/** Weeks and groups beyond the fit, against fits that had them all along in rows of a weight near zero. */
const rows = everyKindRows(83, 80);
const numbers = rows.y.map((_, row) => row);
const lastWeek = Math.max(...rows.week);
const price: TermSpec = { kind: "smooth", column: "price", log: true, size: 6, smoothness: { penalty: 2 } };
const walk: TermSpec = { kind: "random-walk", column: "week", smoothness: { penalty: 5 } };

/** All rows once more, changed, so that means and spreads of columns stay; the copies weigh next to nothing. */
function withCopies(change: Partial<Record<string, (value: never) => number | string>>): ModelData {
  const twice = inOrder(rows, [...numbers, ...numbers]) as unknown as Record<string, (number | string)[]>;
  const changed = Object.fromEntries(Object.entries(twice).map(([name, column]) =>
    [name, column.map((value, row) => (row >= 80 && change[name] !== undefined ? change[name](value as never) : value))]));
  return { ...changed, weight: twice.y.map((_value, row) => (row < 80 ? 1 : 1e-9)) } as ModelData;
}

const cases: { name: string; terms: TermSpec[]; copies: ModelData; at: ModelData }[] = [
  {
    name: "weeks after the last", terms: [price, walk], copies: withCopies({ week: (week: number) => week + 9 }),
    at: { price: [1.2, 1.6, 1.2], week: [lastWeek + 1, lastWeek + 9, lastWeek] },
  },
  {
    name: "weeks before the first", terms: [price, walk], copies: withCopies({ week: (week: number) => week - 6 }),
    at: { price: [1.2, 1.6, 1.2], week: [4, -1, 5] },
  },
  { name: "levels of new groups", terms: everyKind["random effect"], copies: withCopies({ store: (name: string) => `new ${name}` }), at: { price: [1.3, 1.3], store: ["new north", "south"] } },
  { name: "slopes of new groups", terms: everyKind["random slope"], copies: withCopies({ store: (name: string) => `new ${name}` }), at: { price: [1.3, 1.3], store: ["new east", "south"], depth: [0.25, 0.25] } },
  { name: "curves of new groups", terms: everyKind["factor-smooth"], copies: withCopies({ store: (name: string) => `new ${name}` }), at: { price: [1.05, 1.5, 1.9], store: ["new west", "new west", "north"] } },
];

/** Standard errors per unit of the dispersion's root: with more rows there is another dispersion. */
const unitErrors = (model: FittedModel, at: ModelData) => predict(model, at).standardError.map((error) => error / Math.sqrt(model.dispersion));

/** Variances of sums over all rows but one, which pairs of rows enter. */
function unitCovariances(model: FittedModel, at: ModelData): number[] {
  const extended = extendModel(model, at);
  const { count } = designRows(extended, at);
  return Array.from({ length: count }, (_, out) => {
    const gradient = designTransposeTimes(extended, at, Float64Array.from({ length: count }, (__, row) => Number(row !== out) * (row + 1)));
    return covarianceQuadratic(extended, gradient, gradient) / model.dispersion;
  });
}

describe.each(families)("Of a %s model", (family) => {
  it.each(cases)("$name are predicted as if they had been there, and as unsurely", ({ terms, copies, at }) => {
    const model = fitModel(modelOf(family, terms), rows);
    const there = fitModel(modelOf(family, terms, { weights: "weight" }), copies);
    expect(largestDifference(predict(model, at).linearPredictor, predict(there, at).linearPredictor)).toBeLessThan(1e-5);
    expect(largestRelativeDifference(unitErrors(model, at), unitErrors(there, at))).toBeLessThan(1e-4);
    expect(largestRelativeDifference(unitCovariances(model, at), unitCovariances(there, at))).toBeLessThan(1e-3);
  });
});

/** Which of two groupings is eliminated group by group, and which stands among the shared coordinates, is the engine's affair. */
describe.each(families)("Two groupings in a %s model", (family: Family) => {
  const store: TermSpec = { kind: "random-effect", column: "store", smoothness: { penalty: 2 } };
  const promotion: TermSpec = { kind: "random-effect", column: "promotion", smoothness: { penalty: 1 } };
  const curves: TermSpec = { kind: "factor-smooth", column: "price", log: true, group: "store", size: 5, smoothness: { penalty: 3 } };

  it.each<[string, TermSpec[], TermSpec[]]>([
    ["levels of both", [price, store, promotion], [promotion, price, store]],
    ["curves of one, levels of the other", [price, curves, promotion], [promotion, curves, price]],
    ["levels and slopes of one, levels of the other", [price, store, { ...store, by: "depth", id: "slope" } as TermSpec, promotion], [promotion, { ...store, by: "depth", id: "slope" } as TermSpec, price, store]],
  ])("are fitted alike in either order: %s", (_name, terms, turned) => {
    const [one, other] = [terms, turned].map((list) => fitModel(modelOf(family, list), rows));
    expect(largestRelativeDifference(other.fitted, one.fitted)).toBeLessThan(1e-5);
    expect(other.edf).toBeCloseTo(one.edf, 5);
    const next = { price: [1.1, 1.8, 1.4], store: ["north", "new", "west"], promotion: ["none", "display", "coupon"], depth: [0, 0.3, 0.1] };
    const [first, second] = [one, other].map((model) => predict(model, next));
    expect(largestDifference(second.linearPredictor, first.linearPredictor)).toBeLessThan(1e-5);
    expect(largestRelativeDifference(second.standardError, first.standardError)).toBeLessThan(1e-4);
    for (const { id, edf } of one.terms) expect(other.terms.find((term) => term.id === id)?.edf).toBeCloseTo(edf, 5);
  });
});
