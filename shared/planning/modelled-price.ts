import type { PriceSource } from "./sales-row";

/** A price and where it came from. */
export type ModelledPrice = { price: number | null; source: PriceSource };

/** What a week says about its price; null for what is not known. */
export type PriceEvidence = {
  shelfPrice: number | null;
  units: number;
  netSales: number;
  /** The commonest price of the week among the region's stores: see `commonestPrice`. */
  regionPrice: number | null;
  regularPrice: number | null;
};

/**
 * The price a week is modelled at: the shelf price when the extract has it; else net sales / units; in a week without sales
 * the region's commonest price that week, else the regular price. Values that are no price (zero, negative) count as unknown.
 *
 * @returns the price, rounded to 4 decimals as prices are stored, with its source; null and "unknown" when nothing tells it.
 * @example modelledPrice({ shelfPrice: null, units: 10, netSales: 14.9, regionPrice: null, regularPrice: 1.79 })
 * // { price: 1.49, source: "paid" }
 */
export function modelledPrice(evidence: PriceEvidence): ModelledPrice {
  const { shelfPrice, units, netSales, regionPrice, regularPrice } = evidence;
  const inOrder: [PriceSource, number | null][] = [
    ["shelf", shelfPrice],
    ["paid", units > 0 ? netSales / units : null],
    ["region", regionPrice],
    ["regular", regularPrice],
  ];
  for (const [source, value] of inOrder) {
    const price = value === null ? 0 : Math.round(value * 1e4) / 1e4;
    if (Number.isFinite(price) && price > 0) return { price, source };
  }
  return { price: null, source: "unknown" };
}

/**
 * The commonest of a week's prices in a region (the mode); of several equally common ones the lowest, so that the answer does
 * not depend on the order of stores.
 *
 * @param prices shelf prices, or net sales / units, of the region's stores that week; rounded to 4 decimals before counting.
 * @returns null when there are none.
 * @example commonestPrice([1.79, 1.49, 1.79]) // 1.79
 */
export function commonestPrice(prices: readonly number[]): number | null {
  const counts = new Map<number, number>();
  for (const price of prices) {
    const rounded = Math.round(price * 1e4) / 1e4;
    counts.set(rounded, (counts.get(rounded) ?? 0) + 1);
  }
  const ranked = [...counts].sort(([priceA, countA], [priceB, countB]) => countB - countA || priceA - priceB);
  return ranked.length > 0 ? ranked[0][0] : null;
}
