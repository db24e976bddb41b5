import type { EntityManager } from "@mikro-orm/postgresql";
import type { Author } from "../changes/author";
import { mergeKeyed, type KeyedMerge } from "./keyed-merge";
import type { MergeCounts } from "./merge-counts";

/*
 * Staged rows: code, name, gtin, brand, category, sold_by_weight, valid_from, unit_cost, regular_price, tax_rate;
 * several of a product, one for each day from which its terms hold. What describes the product is the same in all.
 */

const described = ["name", "gtin", "brand", "category_id", "sold_by_weight"];
const terms = ["unit_cost", "regular_price", "tax_rate"];

/** A category's name, once there, is not the files' business: they have only its code. */
const categoriesOf = (staged: string): KeyedMerge => ({
  table: "categories",
  source: `
    select distinct given.category as code, coalesce(known.name, given.category) as name
    from ${staged} given left join categories known on known.code = given.category`,
  key: ["code"],
  values: ["name"],
  history: { what: "category", code: (row) => `${row}.code`, described: (row) => ({ name: `${row}.name` }) },
});

const productsOf = (staged: string): KeyedMerge => ({
  table: "products",
  source: `
    select distinct on (given.code) given.code, given.name, given.gtin, given.brand, category.id as category_id, given.sold_by_weight,
      known.replaces_id, known.replaces_size_ratio
    from ${staged} given join categories category on category.code = given.category
    left join products known on known.code = given.code order by given.code, given.line`,
  key: ["code"],
  values: described,
  history: {
    what: "product",
    code: (row) => `${row}.code`,
    described: (row) => ({
      name: `${row}.name`, gtin: `${row}.gtin`, brand: `${row}.brand`, category: `(select code from categories where id = ${row}.category_id)`,
      soldByWeight: `${row}.sold_by_weight`, replaces: `(select code from products where id = ${row}.replaces_id)`,
      replacesSizeRatio: `${row}.replaces_size_ratio`,
    }),
  },
});

const termsOf = (staged: string): KeyedMerge => ({
  table: "product_terms",
  source: `
    select product.id as product_id, given.valid_from, given.unit_cost, given.regular_price, given.tax_rate
    from ${staged} given join products product on product.code = given.code`,
  key: ["product_id", "valid_from"],
  values: terms,
  history: {
    what: "terms",
    code: (row) => `(select code from products where id = ${row}.product_id)`,
    described: (row) => ({
      validFrom: `${row}.valid_from`, unitCost: `${row}.unit_cost`, regularPrice: `${row}.regular_price`, taxRate: `${row}.tax_rate`,
    }),
  },
});

/** What merging staged rows into the products and their terms would do: a row counts as changed where either part does. */
export async function compareProducts(em: EntityManager, staged: string): Promise<MergeCounts> {
  const [row] = await em.execute<[MergeCounts]>(`
    with compared as (
      select product.id is null or kept.product_id is null as is_new,
        (product.name, product.gtin, product.brand, category.code, product.sold_by_weight,
          kept.unit_cost, kept.regular_price, kept.tax_rate) is distinct from
        (given.name, given.gtin, given.brand, given.category::text, given.sold_by_weight,
          given.unit_cost, given.regular_price, given.tax_rate) as differs
      from ${staged} given
      left join products product on product.code = given.code
      left join categories category on category.id = product.category_id
      left join product_terms kept on kept.product_id = product.id and kept.valid_from = given.valid_from)
    select count(*) filter (where is_new)::int as new,
      count(*) filter (where not is_new and differs)::int as changed,
      count(*) filter (where not is_new and not differs)::int as same
    from compared`);
  return row;
}

/** Adds and changes products by their code, with their categories and their terms by day; nothing is removed. */
export async function mergeProducts(em: EntityManager, staged: string, by: Author): Promise<void> {
  await mergeKeyed(em, categoriesOf(staged), by);
  await mergeKeyed(em, productsOf(staged), by);
  await mergeKeyed(em, termsOf(staged), by);
}
