import type { EntityManager } from "@mikro-orm/postgresql";
import { exists } from "../../database/exists";
import type { Product, Store } from "./catalogue.entities";

/** Something that may refer to a row, and how that is said. */
type Reference = { says: string; sql: string; values: (string | number)[] };

/** What refers to a store, in a few words; null where nothing does. */
export async function referencesToStore(em: EntityManager, { id, code }: Store): Promise<string | null> {
  // Sales have no index by store alone, but one by product and store.
  const sold = (table: string) => `select from products product where exists (select from ${table} sold where sold.product_id = product.id and sold.store_id = ?)`;
  return firstReference(em, [
    { says: "sales of it are loaded", sql: sold("weekly_sales"), values: [id] },
    { says: "sales of it were loaded", sql: sold("weekly_sales_history"), values: [id] },
    { says: "models were fitted for it", sql: "select from model_fits where store_id = ?", values: [id] },
    { says: "products are listed in it", sql: "select from listings where store_id = ?", values: [id] },
    { says: "it has temperatures of its own", sql: "select from temperatures where store_code = ?", values: [code] },
    { says: "a scenario is for it", sql: "select from scenarios where ? = any(stores)", values: [code] },
    ...(await waitingFiles(em, { column: "store_id", id })),
  ]);
}

/** What refers to a product, in a few words; null where nothing does. Its terms are part of it. */
export async function referencesToProduct(em: EntityManager, { id }: Product): Promise<string | null> {
  return firstReference(em, [
    { says: "sales of it are loaded", sql: "select from weekly_sales where product_id = ?", values: [id] },
    { says: "sales of it were loaded", sql: "select from weekly_sales_history where product_id = ?", values: [id] },
    { says: "there are models of it", sql: "select from models where product_id = ?", values: [id] },
    { says: "there are scenarios of it", sql: "select from scenarios where product_id = ?", values: [id] },
    { says: "it is listed in stores", sql: "select from listings where product_id = ?", values: [id] },
    { says: "it has funding", sql: "select from product_funding where product_id = ?", values: [id] },
    { says: "another product replaces it", sql: "select from products where replaces_id = ?", values: [id] },
    ...(await waitingFiles(em, { column: "product_id", id })),
  ]);
}

async function firstReference(em: EntityManager, references: readonly Reference[]): Promise<string | null> {
  for (const { says, sql, values } of references) {
    if (await exists(em, sql, values)) return says;
  }
  return null;
}

/**
 * Rows of files that are checked but not loaded name stores and products by our keys, without a foreign key. While this
 * transaction lasts no other check can begin (it would first write the extract's state), so none can name what goes now.
 */
async function waitingFiles(em: EntityManager, { column, id }: { column: "store_id" | "product_id"; id: number }): Promise<Reference[]> {
  await em.execute("lock table extracts in share mode");
  const tables = await em.execute<{ name: string }[]>(
    `select quote_ident(column_of.table_schema) || '.' || quote_ident(column_of.table_name) as name
     from information_schema.columns column_of where column_of.table_schema = 'staging' and column_of.column_name = ?`,
    [column],
  );
  const running = { says: "a file is being checked that may name it", sql: "select from extracts where state in ('checking', 'loading')", values: [] };
  return [
    running,
    ...tables.map(({ name }) => ({ says: "a file that names it waits to be loaded", sql: `select from ${name} where ${column} = ?`, values: [id] })),
  ];
}
