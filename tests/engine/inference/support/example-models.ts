import { fitModel } from "@shared/engine";
import type { FittedModel, ModelInformation, ModelSpec } from "@shared/engine";
import { withCentredLevels } from "@shared/engine/inference/level-centring";
import { posteriorOf } from "@shared/engine/inference/posterior";
import type { Posterior } from "@shared/engine/inference/posterior";
import { termPlaces } from "@shared/engine/inference/term-places";
import type { TermPlace } from "@shared/engine/inference/term-places";
import { seededNormal, seededUniform } from "../../support/generator";

/** Weekly rows of five stores with known drivers; the same for the same seed. */
export function storeRows(seed: number, count = 150) {
  const uniform = seededUniform(seed);
  const normal = seededNormal(seed + 1);
  const price = Array.from({ length: count }, () => Math.round(100 * (1 + uniform())) / 100);
  const temperature = price.map(() => Math.round(10 * (12 + 6 * normal())) / 10);
  const store = price.map(() => `S${1 + Math.floor(5 * uniform())}`);
  const area = price.map(() => (uniform() < 0.4 ? "coast" : uniform() < 0.5 ? "hills" : "plain"));
  const promotion = price.map(() => (uniform() < 0.3 ? "feature" : "none"));
  const week = price.map((_, row) => 1 + Math.floor(row / 5));
  const weight = price.map(() => Math.round(10 * (0.5 + uniform())) / 10);
  const y = price.map((value, row) => 3 - 2 * value + Math.sin(3 * value) + 0.02 * temperature[row] + (promotion[row] === "feature" ? 0.3 : 0)
    + 0.3 * Number(store[row].slice(1)) * (value - 1.5) + 0.4 * Math.sin(week[row] / 6) + (area[row] === "coast" ? 0.5 * value ** 2 : 0) + 0.2 * normal());
  const units = y.map((value) => Math.max(0, Math.round(3 * Math.exp(value / 2 + 1 + 0.2 * normal()))));
  return { price, temperature, store, area, promotion, week, weight, y, units };
}

const promotion = { kind: "factor", column: "promotion", reference: "none" } as const;
const price = { kind: "smooth", column: "price", size: 8 } as const;

/** One model for each way coordinates can stand. */
export const exampleTerms: Record<string, ModelSpec["terms"]> = {
  "lines and a factor": [{ kind: "linear", column: "price" }, { kind: "linear", column: "temperature" }, promotion],
  "curves and a factor": [{ ...price, log: true }, { kind: "cyclic-smooth", column: "week", period: [0.5, 15.5], size: 8 }, promotion],
  "a natural spline": [{ kind: "natural-spline", column: "price", df: 4 }, promotion],
  "a curve per level": [{ kind: "factor", column: "area" }, { ...price, by: "area" }],
  "a curve times a number": [{ ...price, by: "temperature" }, promotion],
  "a surface": [price, { kind: "smooth", column: "temperature", size: 7 }, { kind: "tensor-product", columns: ["price", "temperature"] }],
  "a moving level": [price, { kind: "random-walk", column: "week" }],
  "levels and slopes of stores": [{ kind: "linear", column: "price" }, { kind: "random-effect", column: "store" }, { kind: "random-effect", column: "store", by: "price", id: "slopes" }],
  "a curve per store": [price, { kind: "factor-smooth", column: "price", group: "store", size: 6 }, promotion],
  "two groupings": [price, { kind: "random-effect", column: "store" }, { kind: "random-effect", column: "area" }],
};

export const exampleNames = Object.keys(exampleTerms);

export function exampleModel(name: string, change: Partial<ModelSpec> = {}): FittedModel {
  return fitModel({ response: "y", family: "gaussian", terms: exampleTerms[name], ...change }, storeRows(3));
}

export type Parts = { information: ModelInformation; posterior: Posterior; places: TermPlace[] };

/** What tests are computed from; fails where the model has none. */
export function partsOf(model: FittedModel): Parts {
  if (model.information === null) throw new Error("The model has no information.");
  const information = withCentredLevels(model, model.information);
  const posterior = posteriorOf(model, information);
  if (posterior === null) throw new Error("The model's system is singular.");
  return { information, posterior, places: termPlaces(model, information) };
}
