import type { EntityManager } from "@mikro-orm/postgresql";
import { beginning } from "./products/products.repository";

type Staged = { table: string; rows: number };

/** Puts stores whose codes are not there yet where a merge takes them from; of a code given twice the first counts. */
export function stageNewStores(em: EntityManager, stores: readonly object[]): Promise<Staged> {
  return stageNew(em, {
    table: "new_stores",
    given: stores,
    query: `
      select distinct on (code) given.*, null::date as closed
      from jsonb_to_recordset(?::jsonb) as given(code varchar(64), name varchar(120), region varchar(80), opened date)
      where not exists (select from stores known where known.code = given.code) order by code`,
  });
}

/** The same for products, with terms that hold from the beginning and say nothing. */
export function stageNewProducts(em: EntityManager, products: readonly object[]): Promise<Staged> {
  return stageNew(em, {
    table: "new_products",
    given: products,
    query: `
      select distinct on (code) given.*, 1 as line, false as sold_by_weight, date '${beginning}' as valid_from,
        null::numeric(14,4) as unit_cost, null::numeric(14,4) as regular_price, 0::numeric(6,4) as tax_rate
      from jsonb_to_recordset(?::jsonb) as given(code varchar(64), name varchar(160), category varchar(64), brand varchar(120), gtin varchar(14))
      where not exists (select from products known where known.code = given.code) order by code`,
  });
}

async function stageNew(em: EntityManager, { table, given, query }: { table: string; given: readonly object[]; query: string }): Promise<Staged> {
  await em.execute(`drop table if exists pg_temp.${table}`);
  await em.execute(`create temporary table ${table} on commit drop as ${query}`, [JSON.stringify(given)]);
  const [{ rows }] = await em.execute<[{ rows: number }]>(`select count(*)::int as rows from ${table}`);
  return { table, rows };
}
