import type { Family, ModelData, ModelSpec } from "@shared/engine";
import { negativeBinomialDraw } from "./draws";
import { seededUniform } from "./generator";

/** Prices that units fall with: gently bent, with a threshold that shoppers mind, straight, and steep before it levels off. */
const priceCurves = {
  gentle: (value: number) => -2 * Math.log(value) - 0.8 * Math.log(value) ** 2,
  threshold: (value: number) => -1.2 * Math.log(value) - 0.5 * Math.tanh((value - 1.5) / 0.25),
  straight: (value: number) => -2.2 * Math.log(value),
  saturating: (value: number) => 1.6 * Math.exp(-5 * (value - 1)) - 1.6,
};

export type Shape = keyof typeof priceCurves;

/** What rows are drawn from, on the link scale. */
export const truth = {
  price: priceCurves,
  season: (fraction: number) => 0.3 * Math.sin(2 * Math.PI * fraction) + 0.1 * Math.cos(4 * Math.PI * fraction),
  promotion: { none: 0, feature: 0.5, display: 0.25 },
};

/** Of the gaussian families the standard deviation, of quasi-Poisson the dispersion, of the negative binomial theta, of the binomial trials. */
export const noise = { gaussian: 0.25, "log-gaussian": 0.25, "quasi-poisson": 2.5, "negative-binomial": 5, binomial: 40 } satisfies Record<Family, number>;

/** Counts and amounts are of a hundred, binomial shares of a half, at price 1 and full exposure. */
const levels: Record<Family, number> = {
  gaussian: Math.log(100), "log-gaussian": Math.log(100), "quasi-poisson": Math.log(100), "negative-binomial": Math.log(100), binomial: 0.8,
};

/** Sales of one product: weeks evenly over the year, prices and promotions at random, exposure from a twentieth to the whole. */
export function simulatedSales(family: Family, { seed, count, shape }: { seed: number; count: number; shape: Shape }) {
  const uniform = seededUniform(seed);
  const rows = Array.from({ length: count }, (_, week) => ({
    price: 1 + Math.round(100 * uniform()) / 100,
    yearFraction: ((week + 0.5) / 52) % 1,
    promotion: uniform() < 0.2 ? "feature" as const : uniform() < 0.15 ? "display" as const : "none" as const,
    logExposure: family === "gaussian" || family === "binomial" ? 0 : Math.log(0.05) * uniform(),
  }));
  const predictor = rows.map((row) =>
    levels[family] + truth.price[shape](row.price) + truth.season(row.yearFraction) + truth.promotion[row.promotion] + row.logExposure);
  const data = {
    price: rows.map(({ price }) => price),
    yearFraction: rows.map(({ yearFraction }) => yearFraction),
    promotion: rows.map(({ promotion }) => promotion),
    logExposure: rows.map(({ logExposure }) => logExposure),
    trials: rows.map(() => noise.binomial),
    response: predictor.map((value) => draw(family, value, uniform)),
  } satisfies ModelData;
  return { data, predictor, mean: predictor.map((value) => (family === "gaussian" ? value : Math.exp(value))) };
}

function draw(family: Family, predictor: number, uniform: () => number): number {
  const normal = () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
  const mean = Math.exp(predictor);
  switch (family) {
    case "gaussian": return predictor + noise.gaussian * normal();
    case "log-gaussian": return Math.exp(predictor + noise["log-gaussian"] * normal());
    // Negative binomial with variance dispersion x mean, as it predicts new rows.
    case "quasi-poisson": return negativeBinomialDraw(uniform, mean, mean / (noise["quasi-poisson"] - 1));
    case "negative-binomial": return negativeBinomialDraw(uniform, mean, noise["negative-binomial"]);
    case "binomial": {
      let successes = 0;
      for (let trial = 0; trial < noise.binomial; trial++) if (uniform() < 1 / (1 + Math.exp(-predictor))) successes++;
      return successes / noise.binomial;
    }
  }
}

/** The model whose curves are the truth's. */
export const simulatedSpec = (family: Family): ModelSpec => ({
  response: "response", family, offset: "logExposure", ...(family === "binomial" ? { weights: "trials" } : {}),
  terms: [
    { kind: "smooth", column: "price", log: true, size: 10 },
    { kind: "cyclic-smooth", column: "yearFraction", period: [0, 1], size: 12 },
    { kind: "factor", column: "promotion", reference: "none" },
  ],
});
