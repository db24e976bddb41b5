import type { EntityManager } from "@mikro-orm/postgresql";
import { notFound, unusable } from "../../errors";
import { ProductEntity, StoreEntity, type Product, type Store } from "./catalogue.entities";

export const findStoreAt = (em: EntityManager, code: string): Promise<Store | null> => em.findOne(StoreEntity, { code });

export const findProductAt = (em: EntityManager, code: string): Promise<Product | null> => em.findOne(ProductEntity, { code });

/** @throws ProblemError 404. */
export async function requireStoreAt(em: EntityManager, code: string): Promise<Store> {
  const store = await findStoreAt(em, code);
  if (!store) throw notFound("store");
  return store;
}

/** A product with its category and the one it replaces. @throws ProblemError 404. */
export async function requireProductAt(em: EntityManager, code: string): Promise<Product> {
  const product = await em.findOne(ProductEntity, { code }, { populate: ["category", "replaces"] });
  if (!product) throw notFound("product");
  return product;
}

/** The product that a body names. @throws ProblemError 422 that names the field. */
export async function requireNamedProduct(em: EntityManager, { code, path }: { code: string; path: string }): Promise<Product> {
  const product = await findProductAt(em, code);
  if (product) return product;
  const message = `There is no product with the code ${code}.`;
  throw unusable("unknown-product", message, [{ path, message }]);
}

/** Stores that a body names, in its order. @throws ProblemError 422 that names the first field that is wrong. */
export async function requireNamedStores(em: EntityManager, { codes, path }: { codes: readonly string[]; path: string }): Promise<Store[]> {
  const stores = new Map((await em.find(StoreEntity, { code: { $in: [...codes] } })).map((store) => [store.code, store]));
  const errors = codes.flatMap((code, at) => (stores.has(code) ? [] : [{ path: `${path}.${at}`, message: `There is no store with the code ${code}.` }]));
  const [first] = errors;
  if (first) throw unusable("unknown-store", first.message, errors);
  return codes.map((code) => stores.get(code)).filter((store) => store !== undefined);
}
