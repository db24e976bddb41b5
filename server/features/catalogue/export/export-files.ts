import { extractColumns } from "@shared/contract/extract-columns";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import { beginning } from "../products/products.repository";

/** What of the catalogue goes out as a file. */
export type ExportedKind = Exclude<ExtractKind, "sales">;

/** Queries whose rows are those of a file, with the columns of its kind in their order, each under a name of its own. */
export const exportQueries: Record<ExportedKind, string> = {
  stores: "select code, name, region, opened, closed from stores order by code",
  products: `
    select product.code, product.name, product.gtin, product.brand, category.code as category, product.sold_by_weight::int,
      coalesce(terms.valid_from, date '${beginning}') as valid_from, terms.unit_cost::float8 as unit_cost,
      terms.regular_price::float8 as regular_price, coalesce(terms.tax_rate, 0)::float8 as tax_rate
    from products product join categories category on category.id = product.category_id
    left join product_terms terms on terms.product_id = product.id
    order by product.code, terms.valid_from`,
  listings: `
    select product.code as product, store.code as store, listing.first_day, listing.last_day
    from listings listing join products product on product.id = listing.product_id join stores store on store.id = listing.store_id
    order by product.code, store.code, listing.first_day`,
  funding: `
    select product.code, funding.first_day, funding.last_day, funding.per_unit::float8 as per_unit, funding.lump_sum::float8 as lump_sum
    from product_funding funding join products product on product.id = funding.product_id order by product.code, funding.first_day`,
  events: "select code, name, first_day, last_day, nullif(region, '') as region from events order by first_day, code, region",
  temperatures: `
    select week, nullif(region, '') as region, nullif(store_code, '') as store, temperature_c from temperatures order by week, region, store_code`,
};

/** A file's header: all columns of its kind, in the order in which its query gives them. */
export const exportColumns = (kind: ExportedKind): string[] => extractColumns[kind].map(({ name }) => name);
