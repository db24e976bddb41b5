import type { EntityManager } from "@mikro-orm/postgresql";
import type { ExtractKind } from "@shared/contract/extract-kinds";

const withTax = (columns: readonly string[], rate: string) => columns.map((column) => `${column} = round(${column} * (1 + ${rate}), 4)`).join(", ");

/**
 * Adds the tax to the amounts of staged rows whose file gives them without, by the rate of the product in the week (in force
 * on its middle day); none where the product has no rate. Files of products bring the rate along. Costs are net of tax anyway.
 */
export async function addTax(em: EntityManager, { table, kind }: { table: string; kind: ExtractKind }): Promise<void> {
  if (kind === "products") await em.execute(`update ${table} set ${withTax(["regular_price"], "tax_rate")} where tax_rate > 0 and regular_price is not null`);
  if (kind !== "sales") return;
  await em.execute(`
    update ${table} staged set ${withTax(["net_sales", "regular_price", "shelf_price"], "rated.tax_rate")}
    from (
      select named.product_id, named.week, terms.tax_rate
      from (select distinct product_id, week from ${table}) named
      cross join lateral (
        select tax_rate from product_terms
        where product_id = named.product_id and valid_from <= named.week + 3
        order by valid_from desc limit 1
      ) terms
      where terms.tax_rate > 0
    ) rated
    where staged.product_id = rated.product_id and staged.week = rated.week`);
}
