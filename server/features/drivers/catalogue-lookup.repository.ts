import type { EntityManager } from "@mikro-orm/postgresql";

export type ProductReference = { id: number; code: string; name: string; categoryCode: string };
export type StoreReference = { id: number; code: string; name: string; region: string };

/** The product of a code, with its category's code. */
export async function findProduct(em: EntityManager, code: string): Promise<ProductReference | undefined> {
  const [product] = await em.execute<ProductReference[]>(
    `select p.id, p.code, p.name, c.code as "categoryCode"
     from products p join categories c on c.id = p.category_id where p.code = ?`,
    [code],
  );
  return product;
}

/** The stores among these codes that exist, in no particular order. */
export async function findStores(em: EntityManager, codes: readonly string[]): Promise<StoreReference[]> {
  if (codes.length === 0) return [];
  return em.execute<StoreReference[]>("select id, code, name, region from stores where code in (?)", [[...codes]]);
}
