import { compareStores, mergeStores } from "../../catalogue";
import { copyRow } from "../check/copy-text";
import { daysOf } from "../check/day-columns";
import type { KindDefinition } from "./kind";
import { withoutWeeks } from "./without-weeks";

/** Files of stores. */
export const storesKind: KindDefinition = {
  kind: "stores",
  staged: [
    { name: "code", type: "varchar(64) not null" },
    { name: "name", type: "varchar(120) not null" },
    { name: "region", type: "varchar(80) not null" },
    { name: "opened", type: "date" },
    { name: "closed", type: "date" },
  ],
  key: ["code"],
  keyText: "staged.code",
  reader({ row }) {
    const [store, name, region] = [row.column("store"), row.column("name"), row.column("region")];
    const [opened, closed] = [row.column("opened"), row.column("closed")];
    return () => {
      const [firstDay, lastDay] = daysOf({ first: opened, last: closed });
      return copyRow([
        store.text({ longest: 64, needed: true }),
        name.text({ longest: 120, needed: true }),
        region.text({ longest: 80, needed: true }),
        firstDay,
        lastDay,
      ]);
    };
  },
  compare: async ({ em, table }) => withoutWeeks(await compareStores(em, table)),
  load: ({ em, table, by }) => mergeStores(em, table, by),
};
