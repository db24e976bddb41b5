import type { EntityManager } from "@mikro-orm/postgresql";
import { ProductFundingEntity, type ProductFunding } from "../catalogue.entities";

/** Contributions by product and first day: all, or one product's. */
export function findFunding(em: EntityManager, { product }: { product?: string } = {}): Promise<ProductFunding[]> {
  return em.find(ProductFundingEntity, product === undefined ? {} : { product: { code: product } }, {
    populate: ["product"], orderBy: { product: { code: "asc" }, firstDay: "asc" },
  });
}
