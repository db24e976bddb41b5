import { chiSquareTail, fTail, weightedChiSquareTail } from "@shared/engine/inference/weighted-chi-square";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";
import { rResults } from "./support/r-results";

const { chiSquare, f, gamma, weighted } = rResults.mixtures;
const relative = (value: number, expected: number) => Math.abs(value / expected - 1);

describe("Tails agree with R's, relatively, far out too", () => {
  // R 4.2.2, stats: pchisq(x, degrees, lower.tail = FALSE); fifteen digits.
  it.each(chiSquare.x.map((x, k) => ({ x, degrees: chiSquare.degrees[k], tail: chiSquare.tail[k] })))(
    "chi-square with $degrees degrees of freedom above $x", ({ x, degrees, tail }) => {
      expect(relative(chiSquareTail(x, degrees), tail)).toBeLessThan(1e-10);
    },
  );

  // R 4.2.2, stats: pf(x, numerator, denominator, lower.tail = FALSE). F is a difference of two chi-squares above 0.
  it.each(f.x.map((x, k) => ({ x, numerator: f.numerator[k], denominator: f.denominator[k], tail: f.tail[k] })))(
    "F with $numerator and $denominator degrees of freedom above $x", ({ x, numerator, denominator, tail }) => {
      expect(relative(fTail(x, numerator, denominator), tail)).toBeLessThan(1e-10);
    },
  );

  // Chi-squares of equal weight w are one gamma of scale 2 w: pgamma(x, 1.75, scale = 1.4), 1.75 = (1 + 2.5) / 2.
  it.each(gamma.x.map((x, k) => ({ x, tail: gamma.tail[k] })))("equal weights add up to a gamma, above $x", ({ x, tail }) => {
    const weights = [gamma.scale / 2, gamma.scale / 2];
    expect(relative(weightedChiSquareTail({ weights, degrees: [1, 2 * gamma.shape - 1] }, x), tail)).toBeLessThan(1e-10);
  });

  // mgcv 1.8-41: psum.chisq (Davies 1980) to an absolute 1e-9.
  it.each([
    { mixture: { weights: [6, 3, 1], degrees: [1, 1, 1] }, k: 0 },
    { mixture: { weights: [6, 3, 1], degrees: [1, 1, 1] }, k: 1 },
    { mixture: { weights: [6, 3, -1, -2], degrees: [1, 2, 1, 6] }, k: 2 },
  ])("weighted sums, case $k", ({ mixture, k }) => {
    expect(Math.abs(weightedChiSquareTail(mixture, weighted.x[k]) - weighted.tail[k])).toBeLessThan(2e-7);
  });
});

describe("A weighted sum of chi-squares", () => {
  it("is symmetric about 0 where its weights are", () => {
    expect(weightedChiSquareTail({ weights: [1, -1], degrees: [1, 1] }, 0)).toBeCloseTo(0.5, 12);
    expect(weightedChiSquareTail({ weights: [3, -3, 0.2, -0.2], degrees: [2, 2, 1, 1] }, 0)).toBeCloseTo(0.5, 12);
  });

  it("of two exponentials is known in closed form", () => {
    // chi2(2) is exponential of mean 2: P(a E1 + b E2 > x) = (a exp(-x / 2a) - b exp(-x / 2b)) / (a - b).
    for (const x of [0.1, 2, 20, 200]) {
      const exact = (3 * Math.exp(-x / 6) - 0.5 * Math.exp(-x)) / 2.5;
      expect(relative(weightedChiSquareTail({ weights: [3, 0.5], degrees: [2, 2] }, x), exact)).toBeLessThan(1e-10);
    }
  });

  it("has the whole mass on the side its weights allow", () => {
    expect(weightedChiSquareTail({ weights: [1, 2], degrees: [1, 1] }, -3)).toBe(1);
    expect(weightedChiSquareTail({ weights: [1, 2], degrees: [1, 1] }, 0)).toBe(1);
    expect(weightedChiSquareTail({ weights: [-1, -2], degrees: [1, 1] }, 0)).toBe(0);
    expect(weightedChiSquareTail({ weights: [0, 0], degrees: [1, 1] }, -1)).toBe(1);
    expect(weightedChiSquareTail({ weights: [], degrees: [] }, 0)).toBe(0);
    expect(fTail(-1, 2, 9)).toBe(1);
  });

  it("falls as x grows, scales with its weights, and turns round with their sign", () => {
    const weight = fc.double({ min: -5, max: 5, noNaN: true }).filter((value) => Math.abs(value) > 1e-3);
    const degree = fc.double({ min: 0.3, max: 60, noNaN: true });
    fc.assert(fc.property(
      fc.array(fc.tuple(weight, degree), { minLength: 1, maxLength: 6 }), fc.double({ min: -40, max: 40, noNaN: true }), fc.double({ min: 0.01, max: 20, noNaN: true }),
      (pairs, x, step) => {
        const mixture = { weights: pairs.map(([w]) => w), degrees: pairs.map(([, d]) => d) };
        const here = weightedChiSquareTail(mixture, x);
        expect(here).toBeGreaterThanOrEqual(0);
        expect(here).toBeLessThanOrEqual(1);
        expect(weightedChiSquareTail(mixture, x + step)).toBeLessThanOrEqual(here + 1e-10);
        const doubled = { ...mixture, weights: mixture.weights.map((w) => 2 * w) };
        expect(Math.abs(weightedChiSquareTail(doubled, 2 * x) - here)).toBeLessThan(1e-9);
        const turned = { ...mixture, weights: mixture.weights.map((w) => -w) };
        expect(Math.abs(weightedChiSquareTail(turned, -x) - (1 - here))).toBeLessThan(1e-9);
      },
    ), { seed: 5, numRuns: 200 });
  });

  it("agrees with drawing it, within four standard errors of 40,000 draws", () => {
    const normal = seededNormal(4);
    const weights = [2, 1, 0.3, -0.8];
    let above = 0;
    for (let draw = 0; draw < 40_000; draw++) above += weights.reduce((sum, weight) => sum + weight * normal() ** 2, 0) > 4 ? 1 : 0;
    const tail = weightedChiSquareTail({ weights, degrees: [1, 1, 1, 1] }, 4);
    expect(Math.abs(above / 40_000 - tail)).toBeLessThan(4 * Math.sqrt((tail * (1 - tail)) / 40_000));
  });
});

describe("Bad input", () => {
  it.each([
    { mixture: { weights: [1, 2], degrees: [1] }, x: 1, message: "A mixture has 2 weights and 1 degrees of freedom; it needs as many of both." },
    { mixture: { weights: [Number.NaN], degrees: [1] }, x: 1, message: "A mixture of chi-squares has the number NaN; all must be finite." },
    { mixture: { weights: [1], degrees: [1] }, x: Infinity, message: "A mixture of chi-squares has the number Infinity; all must be finite." },
    { mixture: { weights: [1], degrees: [0] }, x: 1, message: "A chi-square has 0 degrees of freedom; it needs more than 0." },
  ])("$message", ({ mixture, x, message }) => {
    expect(() => weightedChiSquareTail(mixture, x)).toThrow(message);
  });
});
