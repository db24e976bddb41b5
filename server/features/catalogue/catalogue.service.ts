import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";
import { getChain } from "../chain";
import { findProducts, findStores, type ProductOnDay } from "./catalogue.repository";
import type { Store } from "./catalogue.entities";

/** All stores, by code. */
export function listStores(em: EntityManager): Promise<Store[]> {
  return findStores(em);
}

/** All products, by code, with what holds on a day: by default today, as it is where the chain is. */
export async function listProducts(em: EntityManager, { on, now }: { on?: Day; now: Date }): Promise<ProductOnDay[]> {
  return findProducts(em, on ?? dayIn((await getChain(em)).timeZone, now));
}

/** The date of a moment in a time zone, YYYY-MM-DD (the Swedish form of dates is ISO 8601's). */
function dayIn(timeZone: string, now: Date): Day {
  return new Intl.DateTimeFormat("sv-SE", { timeZone, dateStyle: "short" }).format(now);
}
