import type { Day } from "../calendar";

/** How a product is supported in a week: in the leaflet (feature), by a second placement (display), by both or not at all. */
export type Promotion = "none" | "feature" | "display" | "both";

/** How an extract describes the mechanics of a promotion. */
export type FileMechanic = "none" | "price_cut" | "multi_buy" | "coupon" | "other";

/** The mechanics that are modelled: a price cut is depth, never also a mechanic. */
export type Mechanic = Exclude<FileMechanic, "price_cut">;

/** Where the modelled price of a week was taken from; "unknown" when nothing told it. */
export type PriceSource = "shelf" | "paid" | "region" | "regular" | "unknown";

/** One product in one store in one week, as stored. Prices and net sales include tax unless the layout says otherwise. */
export type SalesRow = {
  store: string;
  product: string;
  /** First day of the week. */
  week: Day;
  /** Can be fractional (sold by weight) and, in weeks with net returns, negative. */
  units: number;
  netSales: number;
  regularPrice: number | null;
  shelfPrice: number | null;
  /** The price modelled, from `priceSource`: see `modelledPrice`. */
  price: number | null;
  priceSource: PriceSource;
  feature: boolean;
  display: boolean;
  mechanic: FileMechanic;
  /** Days the store was open; null when the extract does not say, taken as 7. */
  openDays: number | null;
  /** Days on which the product was sold out; null when the extract does not say, taken as 0. */
  stockOutDays: number | null;
  temperatureC: number | null;
  /** The chain's own event of the week; null for an ordinary week. */
  event: string | null;
};

/** The value of `event` in an ordinary week. */
export const NO_EVENT = "none";

/**
 * The level of support that a feature and a display make together.
 *
 * @example promotionOf({ feature: true, display: false }) // "feature"
 */
export function promotionOf({ feature, display }: { feature: boolean; display: boolean }): Promotion {
  if (feature) return display ? "both" : "feature";
  return display ? "display" : "none";
}
