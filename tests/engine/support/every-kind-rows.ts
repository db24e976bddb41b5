import type { Family, ModelSpec, TermSpec } from "@shared/engine";
import { seededNormal, seededUniform } from "./generator";

/** Rows with a driver for every kind of term, four stores, and a response for every family; the same for the same seed. */
export function everyKindRows(seed: number, count = 120) {
  const uniform = seededUniform(seed);
  const normal = seededNormal(seed + 1);
  const price = Array.from({ length: count }, () => Math.round(1000 * (1 + uniform())) / 1000);
  const week = price.map((_, row) => 5 + Math.floor((row * 40) / count));
  const season = week.map((own) => ((own + uniform()) / 52) % 1);
  const temperature = season.map((part) => 12 - 8 * Math.cos(2 * Math.PI * part) + 2 * normal());
  const depth = price.map(() => Math.round(30 * uniform()) / 100);
  const store = price.map((_, row) => ["north", "south", "east", "west"][row % 4]);
  const promotion = price.map(() => ["none", "feature", "display"][Math.floor(3 * uniform())]);
  const predictor = price.map((own, row) =>
    2.4 - 1.5 * Math.log(own) + 0.3 * Math.sin(2 * Math.PI * season[row]) + (promotion[row] === "feature" ? 0.5 : 0) + depth[row]
    + 0.2 * Math.sin(week[row] / 6) + 0.2 * ((row % 4) - 1.5) * (1 + 0.3 * own));
  const y = predictor.map((value) => value + 0.3 * normal());
  const sales = y.map(Math.exp);
  const counts = predictor.map((value) => Math.round(Math.exp(value + 0.4 * normal())));
  const share = predictor.map((value) => Math.round(8 / (1 + Math.exp(2 - value + 0.5 * normal()))) / 8);
  const trials = price.map((_, row) => 2 + (row % 3));
  return { price, week, season, temperature, depth, store, promotion, y, sales, counts, share, trials };
}

export type EveryKindRows = ReturnType<typeof everyKindRows>;

/** A model's response column per family. */
export const responses: Record<Family, keyof EveryKindRows> = {
  gaussian: "y", "log-gaussian": "sales", "quasi-poisson": "counts", "negative-binomial": "counts", binomial: "share",
};

export const families = Object.keys(responses) as Family[];

const given = { penalty: 3 } as const;
const price: TermSpec = { kind: "smooth", column: "price", log: true, size: 7, smoothness: given };
const promotion: TermSpec = { kind: "factor", column: "promotion" };

/** Every kind of term with what it needs beside it, penalties given. The term itself comes last. */
export const everyKind: Record<string, TermSpec[]> = {
  line: [{ kind: "linear", column: "temperature" }],
  factor: [promotion],
  smooth: [price],
  "smooth per level": [promotion, { ...price, by: "promotion" }],
  "smooth times a number": [{ ...price, by: "depth" }],
  circle: [{ kind: "cyclic-smooth", column: "season", period: [0, 1], size: 8, smoothness: given }],
  "natural spline": [{ kind: "natural-spline", column: "price", df: 3 }],
  "local regression": [promotion, { kind: "local-regression", column: "temperature", span: 0.5 }],
  "tensor product": [{ kind: "tensor-product", columns: ["price", "temperature"], smoothness: given }],
  "random walk": [{ kind: "random-walk", column: "week", smoothness: given }],
  "random effect": [price, { kind: "random-effect", column: "store", smoothness: given }],
  "random slope": [price, { kind: "random-effect", column: "store", by: "depth", smoothness: given }],
  "factor-smooth": [price, { kind: "factor-smooth", column: "price", log: true, group: "store", size: 5, smoothness: given }],
};

/** As asked, but with every penalty chosen. */
export const withAuto = (terms: readonly TermSpec[]): TermSpec[] =>
  terms.map((term) => ("smoothness" in term ? { ...term, smoothness: "auto" } : term));

/** As asked, but under another penalty. */
export const withPenalty = (terms: readonly TermSpec[], penalty: number): TermSpec[] =>
  terms.map((term) => ("smoothness" in term ? { ...term, smoothness: { penalty } } : term));

export const modelOf = (family: Family, terms: readonly TermSpec[], change: Partial<ModelSpec> = {}): ModelSpec =>
  ({ response: responses[family], family, terms: [...terms], ...change });

/** The rows in the order given; a row may be there several times. */
export const inOrder = (rows: EveryKindRows, order: readonly number[]): EveryKindRows =>
  Object.fromEntries(Object.entries(rows).map(([name, column]) => [name, order.map((row) => column[row])])) as EveryKindRows;
