import { compareListings, mergeListings } from "../../catalogue";
import { productIdOf, storeIdOf } from "../check/code-columns";
import { copyRow } from "../check/copy-text";
import { daysOf } from "../check/day-columns";
import { rejectSharedDays } from "../check/shared-days.repository";
import type { KindDefinition } from "./kind";
import { withoutWeeks } from "./without-weeks";

const textOf = (id: number | null) => (id === null ? null : String(id));

/** Files of listings: on which days a store has a product. */
export const listingsKind: KindDefinition = {
  kind: "listings",
  staged: [
    { name: "product_id", type: "integer not null" },
    { name: "store_id", type: "integer not null" },
    { name: "first_day", type: "date not null" },
    { name: "last_day", type: "date" },
  ],
  key: ["product_id", "store_id", "first_day"],
  keyText: `concat_ws(', ', (select code from products where id = staged.product_id),
    (select code from stores where id = staged.store_id), staged.first_day)`,
  reader(context) {
    const [product, store] = [context.row.column("product"), context.row.column("store")];
    const [first, last] = [context.row.column("first_day"), context.row.column("last_day")];
    return () => {
      const [firstDay, lastDay] = daysOf({ first, last, needed: "first" });
      return copyRow([textOf(productIdOf(product, context)), textOf(storeIdOf(store, context)), firstDay, lastDay]);
    };
  },
  checkTogether: (together) => rejectSharedDays({ ...together, spans: { table: "listings", of: ["product_id", "store_id"] } }),
  compare: async ({ em, table }) => withoutWeeks(await compareListings(em, table)),
  load: ({ em, table, by }) => mergeListings(em, table, by),
};
