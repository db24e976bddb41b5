import { amountAtMost, countAtMost } from "@shared/engine/family/count-distribution";

export type PlainRow = { linearPredictor: number; standardError: number; level: number; fractional: boolean };

/**
 * The interval by bisection of the mixture's distribution function, itself a sum over closely spaced predictors: slow, and plain to
 * read.
 */
export function plainCountInterval(row: PlainRow, ratioOf: (mean: number) => number, points = 401): { lower: number; upper: number } {
  const parts = Array.from({ length: points }, (_, j) => {
    const deviation = 7.5 * ((2 * j) / (points - 1) - 1);
    return { mean: Math.exp(row.linearPredictor + row.standardError * deviation), weight: Math.exp(-0.5 * deviation ** 2) };
  });
  const total = parts.reduce((sum, { weight }) => sum + weight, 0);
  const single = row.fractional ? amountAtMost : countAtMost;
  const atMost = (value: number) => parts.reduce((sum, { mean, weight }) => sum + weight * single(value, mean, ratioOf(mean)), 0) / total;
  const find = row.fractional ? amountReaching : countReaching;
  const tail = (1 - row.level) / 2;
  return { lower: find(atMost, tail), upper: find(atMost, 1 - tail) };
}

function countReaching(atMost: (count: number) => number, wanted: number): number {
  let low = -1;
  let high = 1;
  while (atMost(high) < wanted) high *= 2;
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2);
    if (atMost(middle) >= wanted) high = middle;
    else low = middle;
  }
  return high;
}

function amountReaching(atMost: (amount: number) => number, wanted: number): number {
  let low = 0;
  let high = 1;
  while (atMost(high) < wanted) high *= 2;
  while (high - low > 1e-12 * high && high > 1e-300) {
    const middle = (low + high) / 2;
    if (middle === low || middle === high) break;
    if (atMost(middle) >= wanted) high = middle;
    else low = middle;
  }
  return high;
}
