import { compareFunding, mergeFunding } from "../../catalogue";
import { productIdOf } from "../check/code-columns";
import { copyRow } from "../check/copy-text";
import { daysOf } from "../check/day-columns";
import { rejectSharedDays } from "../check/shared-days.repository";
import type { KindDefinition } from "./kind";
import { withoutWeeks } from "./without-weeks";

/** Files of suppliers' contributions. */
export const fundingKind: KindDefinition = {
  kind: "funding",
  staged: [
    { name: "product_id", type: "integer not null" },
    { name: "first_day", type: "date not null" },
    { name: "last_day", type: "date not null" },
    { name: "per_unit", type: "numeric(14,4) not null" },
    { name: "lump_sum", type: "numeric(14,4) not null" },
  ],
  key: ["product_id", "first_day"],
  keyText: "concat_ws(', ', (select code from products where id = staged.product_id), staged.first_day)",
  reader(context) {
    const product = context.row.column("product");
    const [first, last] = [context.row.column("first_day"), context.row.column("last_day")];
    const [perUnit, lumpSum] = [context.row.column("per_unit"), context.row.column("lump_sum")];
    return () => {
      const [firstDay, lastDay] = daysOf({ first, last, needed: "both" });
      const [unit, lump] = [perUnit.amount() ?? "0", lumpSum.amount() ?? "0"];
      if (Number(unit) === 0 && Number(lump) === 0 && !context.row.hasError) perUnit.report("no-contribution");
      const id = productIdOf(product, context);
      return copyRow([id === null ? null : String(id), firstDay, lastDay, unit, lump]);
    };
  },
  checkTogether: (together) => rejectSharedDays({ ...together, spans: { table: "product_funding", of: ["product_id"] } }),
  compare: async ({ em, table }) => withoutWeeks(await compareFunding(em, table)),
  load: ({ em, table, by }) => mergeFunding(em, table, by),
};
