import type { Curve } from "@shared/contract/drivers";

export type Elasticity = { estimate: number; lower: number; upper: number };

/** The price elasticity at a price, straight between the points the server gave; null where there is none. */
export const elasticityAt = (curve: Curve, price: number): Elasticity | null => {
  const { elasticity, x } = curve;
  if (!elasticity || x.length === 0) return null;
  const prices = x.map(Number);
  const after = prices.findIndex((value) => value >= price);
  const right = after === -1 ? prices.length - 1 : Math.max(after, Math.min(1, prices.length - 1));
  const left = Math.max(0, right - 1);
  const width = prices[right] - prices[left];
  const share = width === 0 ? 0 : Math.min(1, Math.max(0, (price - prices[left]) / width));
  const between = (values: number[]) => values[left] + share * (values[right] - values[left]);
  return { estimate: between(elasticity.estimate), lower: between(elasticity.lower), upper: between(elasticity.upper) };
};
