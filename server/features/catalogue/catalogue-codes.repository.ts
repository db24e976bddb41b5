import type { EntityManager } from "@mikro-orm/postgresql";

/** First and last day of a store's trade; null where the chain has not said, or it goes on. */
export type StoreDays = { opened: string | null; closed: string | null };

/** What files may name, with our keys. */
export type CatalogueCodes = {
  storeIds: ReadonlyMap<string, number>;
  regions: ReadonlySet<string>;
  /** Of the stores of which either day is known. */
  storeDays: ReadonlyMap<number, StoreDays>;
  productIds: ReadonlyMap<string, number>;
  /** By GTIN as 14 digits; null where several products have it. */
  productIdsByGtin: ReadonlyMap<string, number | null>;
};

/** Every code in the catalogue, to check the rows of a file against. */
export async function catalogueCodes(em: EntityManager): Promise<CatalogueCodes> {
  const stores = await em.execute<({ id: number; code: string; region: string } & StoreDays)[]>(
    "select id, code, region, opened::text, closed::text from stores",
  );
  const products = await em.execute<{ id: number; code: string; gtin: string | null }[]>("select id, code, gtin from products");
  const productIdsByGtin = new Map<string, number | null>();
  for (const { id, gtin } of products) {
    if (gtin === null) continue;
    const key = gtinKey(gtin);
    productIdsByGtin.set(key, productIdsByGtin.has(key) ? null : id);
  }
  return {
    storeIds: new Map(stores.map(({ code, id }) => [code, id])),
    regions: new Set(stores.map(({ region }) => region)),
    storeDays: new Map(stores.filter(({ opened, closed }) => opened ?? closed).map(({ id, opened, closed }) => [id, { opened, closed }])),
    productIds: new Map(products.map(({ code, id }) => [code, id])),
    productIdsByGtin,
  };
}

/** GTINs of 8, 12 and 13 digits are those of 14 with zeros in front (GS1 General Specifications, section 3). */
export function gtinKey(gtin: string): string {
  return gtin.padStart(14, "0");
}
