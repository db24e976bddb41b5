import { stores, type ChainStore } from "../chain/stores";
import type { EventCode } from "../chain/events";
import type { PromotionLevel } from "../types";
import { elasticityAt, priceEffect, seasonEffect, temperatureEffect } from "./curves";
import { productTruths, type ProductTruth } from "./product-truths";

/** What each driver's curve is a function of. */
export type DriverValue = {
  /** Price paid, in the chain's currency. */
  price: number;
  yearFraction: number;
  temperatureC: number;
  promotion: PromotionLevel;
  /** An event's code, or "none". */
  event: EventCode | "none";
};

export type Driver = keyof DriverValue;

type Effects = { [Name in Driver]: (value: DriverValue[Name]) => number };

/**
 * The curve a driver really follows: log effect on weekly units, as a function of the driver's value. Zero at the
 * product's latest regular price, at 10 degrees, at no promotion and no event; on average over a year for the season.
 *
 * @param store a store's code; without one, the chain's curve (a store of the middle)
 * @throws RangeError for a product or store that Larkmoor does not have
 * @example trueCurve({ product: "P101", driver: "price", store: "S03" })(1.49)
 */
export function trueCurve<Name extends Driver>(
  { product, driver, store }: { product: string; driver: Name; store?: string },
): Effects[Name] {
  return effectsOf(truthOf(product), store === undefined ? null : storeOf(store))[driver];
}

/** Own-price elasticity really in force at a price: the slope of the price curve on log-log scales. */
export function trueElasticity({ product, price, store }: { product: string; price: number; store?: string }): number {
  const response = store === undefined ? 1 : storeOf(store).priceResponse;
  return response * elasticityAt(truthOf(product).price, price);
}

function effectsOf(truth: ProductTruth, store: ChainStore | null): Effects {
  const visitors = store?.region === "Coast" ? truth.coastVisitors : 0;
  const season = [...truth.season, { amplitude: visitors, crest: 0.58, timesAYear: 1 }];
  return {
    price: (price) => (store?.priceResponse ?? 1) * priceEffect(truth.price, price),
    yearFraction: (yearFraction) => seasonEffect(season, yearFraction),
    temperatureC: (temperatureC) => temperatureEffect(truth.temperature, temperatureC),
    promotion: (level) => (store?.promotionResponse ?? 1) * truth.promotion[level],
    event: (event) => (event === "none" ? 0 : (truth.events[event] ?? 0)),
  };
}

/** What really drives a product's units. */
export function truthOf(product: string): ProductTruth {
  const truth = productTruths[product];
  if (!truth) throw new RangeError(`Larkmoor has no product "${product}".`);
  return truth;
}

function storeOf(code: string): ChainStore {
  const store = stores.find((candidate) => candidate.code === code);
  if (!store) throw new RangeError(`Larkmoor has no store "${code}".`);
  return store;
}
