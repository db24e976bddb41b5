import { firstDayOfWeek, type Day } from "@shared/calendar";
import type { Coverage } from "@shared/contract/coverage";
import type { CountedWeek } from "./coverage.repository";
import type { CoverageRead } from "./coverage.service";
import { stateOf, usualRows } from "./coverage-states";

/** The picture of store by week, of what was read for it. */
export function presentCoverage({ weeks, counted, weekStart, stores, files, isBehind }: CoverageRead): Coverage {
  const byStore = new Map<number, CountedWeek[]>();
  for (const row of counted) {
    const rows = byStore.get(row.storeId);
    if (rows) rows.push(row);
    else byStore.set(row.storeId, [row]);
  }
  // A week that was counted under another start of the week belongs to the one that holds its first day.
  const places = new Map(weeks.map((week, at) => [week, at]));
  const placeOf = remembered((day: Day) => places.get(firstDayOfWeek(day, weekStart)));
  const fileAt = new Map(files.map(({ id }, at) => [id, at]));
  return {
    weeks, extracts: files, isBehind,
    stores: stores.map((store) => {
      const known = byStore.get(store.id) ?? [];
      const usual = usualRows(known.map(({ rowCount }) => rowCount));
      const cells: (CountedWeek | undefined)[] = new Array(weeks.length).fill(undefined);
      for (const row of known) {
        const at = placeOf(row.week);
        if (at !== undefined) cells[at] = row;
      }
      return {
        code: store.code, name: store.name, region: store.region,
        states: cells.map((cell, at) => stateOf(cell, { week: weeks[at] ?? "", store, usual })),
        rows: cells.map((cell) => cell?.rowCount ?? 0),
        files: cells.map((cell) => fileAt.get(cell?.extractId ?? "") ?? null),
      };
    }),
  };
}

/** Computes each value once. */
function remembered<Key, Value>(compute: (key: Key) => Value): (key: Key) => Value {
  const known = new Map<Key, Value>();
  return (key) => {
    if (!known.has(key)) known.set(key, compute(key));
    return known.get(key) as Value;
  };
}
