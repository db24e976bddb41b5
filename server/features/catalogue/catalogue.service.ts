import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";
import { notFound } from "../../errors";
import { dayIn, getChain } from "../chain";
import { findProducts, findStores, type ProductOnDay } from "./catalogue.repository";
import type { Store } from "./catalogue.entities";

/** All stores, by code. */
export function listStores(em: EntityManager): Promise<Store[]> {
  return findStores(em);
}

/** All products, by code, with what holds on a day: by default today, as it is where the chain is. */
export async function listProducts(em: EntityManager, { on, now }: { on?: Day; now: Date }): Promise<ProductOnDay[]> {
  return findProducts(em, { day: on ?? dayIn((await getChain(em)).timeZone, now) });
}

/** One product with what holds today. */
export async function productToday(em: EntityManager, { code, now }: { code: string; now: Date }): Promise<ProductOnDay> {
  const [product] = await findProducts(em, { day: dayIn((await getChain(em)).timeZone, now), code });
  if (!product) throw notFound("product");
  return product;
}
