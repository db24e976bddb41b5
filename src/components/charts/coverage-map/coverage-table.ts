import type { ChartTable } from "../frame/chart-table";
import type { CoverageStore } from "./coverage-data";
import { coverageRows, stretchesOf } from "./coverage-data";

/** The picture in words and numbers: each stretch of weeks in which a store stands the same way. */
export const coverageTable = (stores: readonly CoverageStore[], weeks: readonly string[]): ChartTable => ({
  columns: ["Store", "Name", "Region", "State", "From week of", "To week of", "Weeks", "Rows loaded"],
  rows: coverageRows(stores).flatMap((row) =>
    row.kind === "region"
      ? []
      : stretchesOf(row.store).map(({ state, first, last, rows }) => [
          row.store.code, row.store.name, row.store.region, state, weeks[first], weeks[last], last - first + 1, rows,
        ]),
  ),
});
