import type { ModelData, ModelSpec } from "@shared/engine";
import { seededNormal, seededUniform } from "./generator";

/** Weekly rows of one product in one store, with known drivers; the same for the same seed. */
export function salesRows(seed: number, count = 130) {
  const uniform = seededUniform(seed);
  const normal = seededNormal(seed + 1);
  const price = Array.from({ length: count }, () => Math.round(100 * (1 + uniform())) / 100);
  const yearFraction = price.map((_, week) => ((week + 0.5) / 52) % 1);
  const temperature = yearFraction.map((fraction) => 10 - 9 * Math.cos(2 * Math.PI * fraction) + normal());
  const promotion = price.map(() => (uniform() < 0.2 ? "feature" : uniform() < 0.1 ? "display" : "none"));
  const logUnits = price.map((value, week) =>
    4 - 2 * Math.log(value) - 0.8 * Math.log(value) ** 2 + 0.3 * Math.sin(2 * Math.PI * yearFraction[week])
    + (promotion[week] === "feature" ? 0.5 : 0) + 0.25 * normal());
  const units = logUnits.map((value) => Math.round(Math.exp(value)));
  return { price, yearFraction, temperature, promotion, logUnits, units } satisfies ModelData;
}

export const priceCurve = { kind: "smooth", column: "price", log: true, size: 8 } as const;
export const seasonCurve = { kind: "cyclic-smooth", column: "yearFraction", period: [0, 1] as [number, number], size: 12 } as const;

export const gaussianSpec: ModelSpec = {
  response: "logUnits", family: "gaussian",
  terms: [priceCurve, seasonCurve, { kind: "factor", column: "promotion", reference: "none" }, { kind: "linear", column: "temperature" }],
};

export const quasiPoissonSpec: ModelSpec = { ...gaussianSpec, response: "units", family: "quasi-poisson" };

/** The same with weeks, stores, brands, depths and shares: columns for every kind of term and family. */
export function rowsForEveryKind(count: number): ModelData {
  const base = salesRows(5, count);
  return {
    ...base,
    week: base.price.map((_, row) => row + 1),
    store: base.price.map((_, row) => ["north", "south", "east", "west"][row % 4]),
    brand: base.price.map((_, row) => ["own", "rival"][row % 2]),
    depth: base.price.map((_, row) => ((row * 7) % 10) / 20),
    share: base.price.map((_, row) => ((row * 3) % 11) / 10),
  };
}
