import { compareProducts, mergeProducts } from "../../catalogue";
import { copyRow } from "../check/copy-text";
import { dayOf } from "../check/day-columns";
import { gtinOf } from "../check/gtin-column";
import type { Column } from "../check/row";
import { rejectContradictingProducts } from "../check/together.repository";
import type { KindDefinition } from "./kind";
import { withoutWeeks } from "./without-weeks";

/** From this day on terms hold for which a file gives none. */
const beginning = "1970-01-01";

function taxRateOf(column: Column): string {
  const value = column.number({ limit: 1e6 });
  if (value !== null && (Number(value) < 0 || Number(value) > 1)) column.report("bad-tax-rate");
  return value ?? "0";
}

/** Files of products, with a row for each day from which other terms hold. */
export const productsKind: KindDefinition = {
  kind: "products",
  staged: [
    { name: "code", type: "varchar(64) not null" },
    { name: "name", type: "varchar(160) not null" },
    { name: "gtin", type: "varchar(14)" },
    { name: "brand", type: "varchar(120)" },
    { name: "category", type: "varchar(64) not null" },
    { name: "sold_by_weight", type: "boolean not null" },
    { name: "valid_from", type: "date not null" },
    { name: "unit_cost", type: "numeric(14,4)" },
    { name: "regular_price", type: "numeric(14,4)" },
    { name: "tax_rate", type: "numeric(6,4) not null" },
  ],
  key: ["code", "valid_from"],
  keyText: "concat_ws(', ', staged.code, staged.valid_from)",
  reader({ row }) {
    const [product, name, gtin, brand, category] = ["product", "name", "gtin", "brand", "category"].map((column) => row.column(column));
    const [byWeight, validFrom, cost, price, tax] = ["sold_by_weight", "valid_from", "unit_cost", "regular_price", "tax_rate"].map(
      (column) => row.column(column),
    );
    return () => copyRow([
      product.text({ longest: 64, needed: true }),
      name.text({ longest: 160, needed: true }),
      gtinOf(gtin),
      brand.text({ longest: 120 }),
      category.text({ longest: 64, needed: true }),
      byWeight.flag(),
      dayOf(validFrom) ?? beginning,
      cost.amount(),
      price.price(),
      taxRateOf(tax),
    ]);
  },
  checkTogether: rejectContradictingProducts,
  compare: async ({ em, table }) => withoutWeeks(await compareProducts(em, table)),
  load: ({ em, table, by }) => mergeProducts(em, table, by),
};
