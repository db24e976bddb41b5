import { compareTemperatures, mergeTemperatures } from "../../catalogue";
import { copyRow } from "../check/copy-text";
import { WeekReader } from "../check/day-columns";
import type { Column, Row } from "../check/row";
import type { KindDefinition } from "./kind";
import { withoutWeeks } from "./without-weeks";

const mostDegrees = 60;

/** The temperature in a column, or null: empty, or reported where no week of any place has such a mean. */
export function temperatureOf(column: Column, { needed = false }: { needed?: boolean } = {}): string | null {
  const value = column.number({ limit: 1e6, needed });
  return value !== null && Math.abs(Number(value)) > mostDegrees ? column.report("temperature-out-of-range") : value;
}

/** A temperature is for a region or for one store. */
function placeReader({ row, stores, regions }: { row: Row; stores: ReadonlyMap<string, number>; regions: ReadonlySet<string> }) {
  const [region, store] = [row.column("region"), row.column("store")];
  return () => {
    const place = { region: region.text({ longest: 80 }), store: store.text({ longest: 64 }) };
    if ((place.region === null) === (place.store === null)) region.report("store-or-region");
    if (place.store !== null && !stores.has(place.store)) store.report("unknown-store");
    if (place.region !== null && !regions.has(place.region)) region.report("unknown-region");
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
  reader({ row, codes, calendar, now }) {
    const [week, temperature] = [row.column("week"), row.column("temperature_c")];
    const weeks = new WeekReader(calendar, now);
    const readPlace = placeReader({ row, stores: codes.storeIds, regions: codes.regions });
    return () => {
      const place = readPlace();
      return copyRow([weeks.read(week), place.region ?? "", place.store ?? "", temperatureOf(temperature, { needed: true })]);
    };
  },
  weekColumn: "week",
  compare: async ({ em, table }) => withoutWeeks(await compareTemperatures(em, table)),
  load: ({ em, table }) => mergeTemperatures(em, table),
};
