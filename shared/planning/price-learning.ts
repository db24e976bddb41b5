import { promotionOf } from "./sales-row";
import type { SalesRow } from "./sales-row";

/** How much there was to learn a price effect from, in one store. */
export type PriceLearning = {
  /** Weeks whose price moved without a promotion. */
  weeksMoved: number;
  /** Distinct regular prices. */
  regularPrices: number;
  /** False below 5 moves: the elasticity is greyed and a price search asks for confirmation. */
  enough: boolean;
};

const FEWEST_MOVES = 5;

/** Prices closer than this share are the same price: what is paid per unit wavers by a little. */
const SAME_PRICE = 0.005;

/**
 * Counts the weeks in which the price moved by itself: weeks without promotion or mechanic whose price differs by more than
 * 0.5 % from that of the last such week before. Moves into and out of promotions do not count, because what they show
 * cannot be told from the promotion.
 *
 * @param rows one product in one store, in any order; rows without a price are passed over.
 * @example priceLearning(rows) // { weeksMoved: 19, regularPrices: 3, enough: true }
 */
export function priceLearning(rows: readonly SalesRow[]): PriceLearning {
  const byItself = rows
    .filter((row) => promotionOf(row) === "none" && (row.mechanic === "none" || row.mechanic === "price_cut"))
    .sort((one, other) => (one.week < other.week ? -1 : 1));
  let weeksMoved = 0;
  let previous: number | null = null;
  for (const { price } of byItself) {
    if (price === null) continue;
    if (previous !== null && Math.abs(price / previous - 1) > SAME_PRICE) weeksMoved++;
    previous = price;
  }
  const regularPrices = new Set(rows.map((row) => row.regularPrice).filter((price) => price !== null));
  return { weeksMoved, regularPrices: regularPrices.size, enough: weeksMoved >= FEWEST_MOVES };
}
