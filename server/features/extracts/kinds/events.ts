import { compareEvents, mergeEvents } from "../../catalogue";
import { copyRow } from "../check/copy-text";
import { daysOf } from "../check/day-columns";
import type { KindDefinition } from "./kind";
import { withoutWeeks } from "./without-weeks";

/** Files of the chain's events, a row an occurrence. */
export const eventsKind: KindDefinition = {
  kind: "events",
  staged: [
    { name: "code", type: "varchar(64) not null" },
    { name: "name", type: "varchar(120) not null" },
    { name: "first_day", type: "date not null" },
    { name: "last_day", type: "date not null" },
    { name: "region", type: "varchar(80) not null" },
  ],
  key: ["code", "first_day", "region"],
  keyText: "concat_ws(', ', staged.code, staged.first_day, nullif(staged.region, ''))",
  reader({ row, codes }) {
    const [event, name, region] = [row.column("event"), row.column("name"), row.column("region")];
    const [first, last] = [row.column("first_day"), row.column("last_day")];
    return () => {
      const [firstDay, lastDay] = daysOf({ first, last, needed: "both" });
      const heldIn = region.text({ longest: 80 });
      if (heldIn !== null && !codes.regions.has(heldIn)) region.report("unknown-region");
      return copyRow([
        event.text({ longest: 64, needed: true }), name.text({ longest: 120, needed: true }), firstDay, lastDay, heldIn ?? "",
      ]);
    };
  },
  compare: async ({ em, table }) => withoutWeeks(await compareEvents(em, table)),
  load: ({ em, table, by }) => mergeEvents(em, table, by),
};
