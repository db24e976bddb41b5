import type { EntityManager } from "@mikro-orm/postgresql";
import { exists } from "../../../database/exists";
import { CategoryEntity, ProductTermsEntity, type Category, type ProductTerms } from "../catalogue.entities";

/** Files that give no day mean from the beginning; so do products entered by hand. */
export const beginning = "1970-01-01";

/** A product's terms, oldest first. */
export function findTerms(em: EntityManager, productId: number): Promise<ProductTerms[]> {
  return em.find(ProductTermsEntity, { product: { id: productId } }, { orderBy: { validFrom: "asc" } });
}

export const findCategory = (em: EntityManager, code: string): Promise<Category | null> => em.findOne(CategoryEntity, { code });

/** Categories by code, with how many products each has. */
export async function findCategories(em: EntityManager): Promise<{ code: string; name: string; products: number }[]> {
  return em.execute<{ code: string; name: string; products: number }[]>(
    `select category.code, category.name, count(product.id)::int as products
     from categories category left join products product on product.category_id = category.id
     group by category.id order by category.code`,
  );
}

/** Whether a product is, directly or by others, what another one replaced. */
export function replacesInTurn(em: EntityManager, { productId, earlierId }: { productId: number; earlierId: number }): Promise<boolean> {
  return exists(
    em,
    `with recursive earlier as (
       select ?::int as id
       union select product.replaces_id from products product join earlier on earlier.id = product.id where product.replaces_id is not null
     ) select from earlier where id = ?`,
    [earlierId, productId],
  );
}
