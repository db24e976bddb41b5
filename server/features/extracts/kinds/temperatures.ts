import type { Day } from "@shared/calendar";
import { compareTemperatures, mergeTemperatures } from "../../catalogue";
import { copyRow } from "../check/copy-text";
import { WeekReader } from "../check/day-columns";
import type { Column } from "../check/row";
import type { KindDefinition, ReaderContext } from "./kind";
import { withoutWeeks } from "./without-weeks";

const mostDegrees = 60;

/** The temperature in a column, or null: empty, or reported where no week of any place has such a mean. */
export function temperatureOf(column: Column, { needed = false }: { needed?: boolean } = {}): string | null {
  const value = column.number({ limit: 1e6, needed });
  return value !== null && Math.abs(Number(value)) > mostDegrees ? column.report("temperature-out-of-range") : value;
}

/** A temperature is for a region or for one store. */
function placeReader({ row, codes, notes }: Pick<ReaderContext, "row" | "codes" | "notes">) {
  const [region, store] = [row.column("region"), row.column("store")];
  return (week: Day | null) => {
    const place = { region: region.text({ longest: 80 }), store: store.text({ longest: 64 }) };
    if ((place.region === null) === (place.store === null)) region.report("store-or-region");
    if (place.store !== null && !codes.storeIds.has(place.store)) {
      notes.unknownStores.add(place.store, week);
      store.report("unknown-store");
    }
    if (place.region !== null && !codes.regions.has(place.region)) region.report("unknown-region");
    return place;
  };
}

/** Files of weekly mean temperatures. */
export const temperaturesKind: KindDefinition = {
  kind: "temperatures",
  staged: [
    { name: "week", type: "date not null" },
    { name: "region", type: "varchar(80) not null" },
    { name: "store_code", type: "varchar(64) not null" },
    { name: "temperature_c", type: "double precision not null" },
  ],
  key: ["week", "region", "store_code"],
  keyText: "concat_ws(', ', staged.week, nullif(staged.region, ''), nullif(staged.store_code, ''))",
  reader({ row, codes, calendar, today, notes }) {
    const [week, temperature] = [row.column("week"), row.column("temperature_c")];
    const weeks = new WeekReader(calendar, today);
    const readPlace = placeReader({ row, codes, notes });
    return () => {
      const firstDay = weeks.read(week);
      const place = readPlace(firstDay);
      return copyRow([firstDay, place.region ?? "", place.store ?? "", temperatureOf(temperature, { needed: true })]);
    };
  },
  weekColumn: "week",
  compare: async ({ em, table }) => withoutWeeks(await compareTemperatures(em, table)),
  load: ({ em, table, by }) => mergeTemperatures(em, table, by),
};
