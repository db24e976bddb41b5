import { fitModel, predict } from "@shared/engine";
import type { Family, FittedModel, ModelData } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { gammaDraw, negativeBinomialDraw, poissonDraw } from "../support/draws";
import { seededNormal, seededUniform } from "../support/generator";

/** Rows of a driver and a response whose scatter is the family's; the same for the same seed. */
function simulated(seed: number, level: number, draw: (mean: number, uniform: () => number) => number) {
  const uniform = seededUniform(seed);
  const price = Array.from({ length: 60 }, () => Math.round(100 * (1 + uniform())) / 100);
  return { price, y: price.map((value) => draw(Math.exp(level - Math.log(value)), uniform)) };
}

/** Per family: how the response scatters, and how the family says that a new row does at a linear predictor. */
type Case = {
  name: string; family: Family; rows: { price: number[]; y: number[] };
  draw: (model: FittedModel, eta: number, random: { uniform: () => number; normal: () => number }) => number;
};

const amount = (mean: number, scale: number, uniform: () => number) => scale * gammaDraw(uniform, mean / scale);
const cases: Case[] = [
  {
    name: "a normal response", family: "gaussian", rows: simulated(1, 1, (mean, uniform) => mean + 0.4 * (uniform() + uniform() + uniform() - 1.5)),
    draw: ({ dispersion }, eta, { normal }) => eta + Math.sqrt(dispersion) * normal(),
  },
  {
    name: "a lognormal response", family: "log-gaussian", rows: simulated(2, 2, (mean, uniform) => mean * Math.exp(uniform() + uniform() - 1)),
    draw: ({ dispersion }, eta, { normal }) => Math.exp(eta + Math.sqrt(dispersion) * normal()),
  },
  {
    name: "counts scattered three times as much as Poisson's", family: "quasi-poisson", rows: simulated(3, 3, (mean, uniform) => negativeBinomialDraw(uniform, mean, mean / 2)),
    draw: ({ dispersion }, eta, { uniform }) => negativeBinomialDraw(uniform, Math.exp(eta), Math.exp(eta) / (dispersion - 1)),
  },
  {
    name: "counts scattered less than Poisson's", family: "quasi-poisson", rows: simulated(4, 3, (mean, uniform) => Math.round(mean + uniform())),
    draw: (_model, eta, { uniform }) => poissonDraw(uniform, Math.exp(eta)),
  },
  {
    name: "amounts", family: "quasi-poisson", rows: simulated(5, 3, (mean, uniform) => Math.round(1000 * amount(mean, 2.5, uniform)) / 1000),
    draw: ({ dispersion }, eta, { uniform }) => amount(Math.exp(eta), dispersion, uniform),
  },
  {
    name: "negative binomial counts", family: "negative-binomial", rows: simulated(6, 4, (mean, uniform) => negativeBinomialDraw(uniform, mean, 6)),
    draw: ({ theta }, eta, { uniform }) => negativeBinomialDraw(uniform, Math.exp(eta), theta ?? Number.NaN),
  },
];
const draws = 8000;

describe.each(cases)("An interval of a new row of $name", ({ family, rows, draw }) => {
  const model = fitModel({ response: "y", family, terms: [{ kind: "smooth", column: "price", log: true, size: 6 }] }, rows);
  const next: ModelData = { price: [1.05, 1.5, 3.2] };

  it.each([0.5, 0.8, 0.95])("holds its share of simulated rows, coefficients drawn too: level %d, within four standard errors", (level) => {
    const { lower, upper, linearPredictor, standardError } = predict(model, next, { level, interval: "observation" });
    const [uniform, normal] = [seededUniform(99), seededNormal(98)];
    for (let row = 0; row < 3; row++) {
      let [below, inside, above] = [0, 0, 0];
      for (let k = 0; k < draws; k++) {
        const value = draw(model, linearPredictor[row] + standardError[row] * normal(), { uniform, normal });
        if (value < lower[row]) below++;
        else if (value > upper[row]) above++;
        else inside++;
      }
      const tail = (1 - level) / 2;
      const error = 4 * Math.sqrt((tail * (1 - tail)) / draws);
      // Ends of counts are the first whole numbers that reach the tails: less than a tail lies below, and above.
      expect(below / draws).toBeLessThan(tail + error);
      expect(above / draws).toBeLessThan(tail + error);
      const isWhole = family !== "gaussian" && family !== "log-gaussian" && !model.fractionalResponse;
      if (!isWhole) expect(inside / draws).toBeLessThan(level + 4 * Math.sqrt((level * (1 - level)) / draws));
      else expect([Number.isInteger(lower[row]), Number.isInteger(upper[row])]).toEqual([true, true]);
    }
  });

  it("holds the interval of the mean beside it, and grows with the level", () => {
    const at = (level: number) => predict(model, next, { level, interval: "observation" });
    const mean = predict(model, next, { level: 0.9 });
    const [narrow, wide] = [at(0.6), at(0.9)];
    for (let row = 0; row < 3; row++) {
      expect(wide.upper[row]).toBeGreaterThanOrEqual(narrow.upper[row]);
      expect(wide.lower[row]).toBeLessThanOrEqual(narrow.lower[row]);
      expect(wide.upper[row]).toBeGreaterThanOrEqual(mean.upper[row]);
      expect(wide.lower[row]).toBeLessThanOrEqual(mean.lower[row]);
    }
  });

  it("has a mean whose interval is the link's inverse of predictor and standard errors, and a median only where there is one", () => {
    const { mean, median, lower, upper, linearPredictor, standardError } = predict(model, next, { level: 0.95 });
    const z = 1.959963984540054;
    for (let row = 0; row < 3; row++) {
      const ends = [-z, z].map((own) => linearPredictor[row] + own * standardError[row]);
      const inverse = (value: number) => (family === "gaussian" ? value : Math.exp(value + (family === "log-gaussian" ? model.dispersion / 2 : 0)));
      expect(lower[row]).toBeCloseTo(inverse(ends[0]), 10);
      expect(upper[row]).toBeCloseTo(inverse(ends[1]), 10);
      expect(mean[row]).toBeCloseTo(inverse(linearPredictor[row]), 10);
    }
    if (family === "gaussian") expect(median).toEqual(mean);
    else if (family === "log-gaussian") expect(median?.[1]).toBeCloseTo(Math.exp(linearPredictor[1]), 12);
    else expect(median).toBe(null);
  });
});
