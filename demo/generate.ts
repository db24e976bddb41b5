import { addDays, addWeeks, yearFraction } from "@shared/calendar";
import { defaultToday, weeksBefore } from "./chain/calendar";
import { eventsOfYears, type EventCode } from "./chain/events";
import { fundingFrom } from "./chain/funding";
import { listingsFrom } from "./chain/listings";
import { products, type ChainProduct } from "./chain/products";
import { stores, type ChainStore } from "./chain/stores";
import { createRandom } from "./random";
import { logDemand, type StoreSetting } from "./stages/demand";
import { makeOffers, type Offer } from "./stages/offers";
import { storeShocks, weekShocks } from "./stages/shocks";
import { makeTemperatures } from "./stages/temperatures";
import { drawUnits } from "./stages/units";
import { truthOf } from "./truth/true-curve";
import type { Demo, EventRow, ProductRow, SalesRow, StoreRow, TemperatureRow } from "./types";

export type DemoOptions = {
  /** Every draw follows from it; the truth does not depend on it. */
  seed?: number;
  /** A day; the sales end with the last week that ended before it. */
  today?: string;
};

/** The seed of the chain that is shipped. */
export const defaultSeed = 5;

/**
 * Makes the whole demo chain: catalogue, weather, events and three years of weekly sales. Pure: the same options give
 * the same rows. Each stage draws from a stream of its own, so a stage added later leaves the others' draws alone.
 *
 * @throws CalendarError "not-a-day" when `today` is none
 * @example generateDemo().sales.length // 67392
 */
export function generateDemo({ seed = defaultSeed, today = defaultToday }: DemoOptions = {}): Demo {
  const weeks = weeksBefore(today);
  const temperatures = makeTemperatures({ weeks, random: createRandom(seed, "weather") });
  const events = eventsAround(weeks);
  const settings = settingsByStore({ weeks, temperatures, events });
  return {
    stores: stores.map(storeRow),
    products: products.flatMap((product) => productRows(product, weeks[0])),
    listings: listingsFrom({ products, stores, firstWeek: weeks[0] }),
    funding: fundingFrom(weeks[0]),
    events,
    temperatures,
    sales: inOrder(products.flatMap((product) => productSales({ product, weeks, settings, seed }))),
  };
}

/** Events from the first week to a year past the last: plans for coming weeks need them. */
function eventsAround(weeks: string[]): EventRow[] {
  const last = addDays(weeks[weeks.length - 1], 371);
  return eventsOfYears(Number(weeks[0].slice(0, 4)), Number(last.slice(0, 4))).filter(
    ({ firstDay }) => firstDay >= weeks[0] && firstDay <= last,
  );
}

function settingsByStore(
  { weeks, temperatures, events }: { weeks: string[]; temperatures: TemperatureRow[]; events: EventRow[] },
): Map<string, StoreSetting[]> {
  const temperature = new Map(temperatures.map((row) => [`${row.week}/${row.region}`, row.temperatureC]));
  const eventOf = (week: string, { region }: ChainStore) =>
    events.find((row) => row.firstDay === week && (row.region === null || row.region === region))?.event ?? "none";
  return new Map(
    stores.map((store) => [
      store.code,
      weeks.map((week) => ({
        yearFraction: yearFraction(week),
        temperatureC: temperature.get(`${week}/${store.region}`) ?? Number.NaN,
        event: eventOf(week, store) as EventCode | "none",
      })),
    ]),
  );
}

function productSales(
  { product, weeks, settings, seed }:
  { product: ChainProduct; weeks: string[]; settings: Map<string, StoreSetting[]>; seed: number },
): SalesRow[] {
  const weekCount = weeks.length;
  const offers = makeOffers({ product, stores, weekCount, random: createRandom(seed, `offers of ${product.code}`) });
  const shared = weekShocks({ seed, product, weekCount });
  const { dispersion } = truthOf(product.code);
  return stores.flatMap((store) => {
    const own = storeShocks({ seed, product, store: store.code, weekCount });
    const random = createRandom(seed, `units of ${product.code} in ${store.code}`);
    const storeOffers = offers.get(store.code) ?? [];
    const storeSettings = settings.get(store.code) ?? [];
    const demand = logDemand({ product: product.code, store, offers: storeOffers, settings: storeSettings });
    return storeOffers.map((offer, index) => {
      const mean = Math.exp(demand[index] + shared[index] + own[index]);
      const units = drawUnits({ mean, dispersion, soldByWeight: product.soldByWeight, random });
      return salesRow({ week: weeks[index], store: store.code, product: product.code, offer, units });
    });
  });
}

function salesRow(
  { week, store, product, offer, units }: { week: string; store: string; product: string; offer: Offer; units: number },
): SalesRow {
  const { regularPrice, shelfPrice, promotion } = offer;
  return {
    week,
    store,
    product,
    units,
    netSales: Math.round(units * shelfPrice * 100) / 100,
    regularPrice,
    shelfPrice,
    feature: promotion === "feature" || promotion === "both",
    display: promotion === "display" || promotion === "both",
    mechanic: shelfPrice < regularPrice ? "price_cut" : "none",
  };
}

/** By week, store and product, as a store system writes them. */
function inOrder(rows: SalesRow[]): SalesRow[] {
  const key = ({ week, store, product }: SalesRow) => `${week}${store}${product}`;
  return rows
    .map((row) => ({ row, key: key(row) }))
    .sort((one, other) => (one.key < other.key ? -1 : 1))
    .map(({ row }) => row);
}

function storeRow({ code, name, region, opened }: ChainStore): StoreRow {
  return { store: code, name, region, opened, closed: null };
}

function productRows({ code, prices, ...product }: ChainProduct, firstWeek: string): ProductRow[] {
  return prices.map(({ fromWeek, ...terms }) => ({
    product: code,
    name: product.name,
    gtin: product.gtin,
    brand: product.brand,
    category: product.category,
    soldByWeight: product.soldByWeight,
    validFrom: addWeeks(firstWeek, fromWeek),
    ...terms,
  }));
}
