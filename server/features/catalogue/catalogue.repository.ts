import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";
import { StoreEntity, type Store } from "./catalogue.entities";

/** All stores by code. */
export function findStores(em: EntityManager): Promise<Store[]> {
  return em.find(StoreEntity, {}, { orderBy: { code: "asc" } });
}

/** A product with what holds on a day. */
export type ProductOnDay = {
  code: string;
  name: string;
  gtin: string | null;
  brand: string | null;
  category: string;
  categoryName: string;
  soldByWeight: boolean;
  replaces: string | null;
  replacesSizeRatio: number | null;
  unitCost: number | null;
  regularPrice: number | null;
  taxRate: number | null;
};

/** All products by code, or one, with the terms in force on a day; before a product's first terms those are null. */
export function findProducts(em: EntityManager, { day, code }: { day: Day; code?: string }): Promise<ProductOnDay[]> {
  return em.execute<ProductOnDay[]>(
    `select product.code, product.name, product.gtin, product.brand, category.code as category,
       category.name as "categoryName", product.sold_by_weight as "soldByWeight",
       replaced.code as replaces, product.replaces_size_ratio::float8 as "replacesSizeRatio", terms.unit_cost::float8 as "unitCost",
       terms.regular_price::float8 as "regularPrice", terms.tax_rate::float8 as "taxRate"
     from products product
     join categories category on category.id = product.category_id
     left join products replaced on replaced.id = product.replaces_id
     left join lateral (
       select * from product_terms where product_id = product.id and valid_from <= ?::date
       order by valid_from desc limit 1
     ) terms on true
     ${code === undefined ? "" : "where product.code = ?"}
     order by product.code`,
    code === undefined ? [day] : [day, code],
  );
}
