import type { ChainProduct } from "../chain/products";

/** The chain's regular price of a product in a week. */
export function regularPriceAt({ prices }: ChainProduct, weekIndex: number): number {
  return prices.filter(({ fromWeek }) => fromWeek <= weekIndex).at(-1)?.regularPrice ?? prices[0].regularPrice;
}

/** Prices end in 4 or 9, as shelf labels do; what a ratio of 1 leaves alone stays as it is. */
function labelPrice(price: number): number {
  return Math.round(Math.round(price * 20) * 5 - 1) / 100;
}

/** A store's own regular price during a trial. */
export function trialPrice(chainPrice: number, ratio: number): number {
  return ratio === 1 ? chainPrice : labelPrice(chainPrice * ratio);
}

/** The price after a cut of a share of the regular price. */
export function cutPrice(regularPrice: number, depth: number): number {
  return depth === 0 ? regularPrice : labelPrice(regularPrice * (1 - depth));
}
