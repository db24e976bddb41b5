import { format as formatDate, parseISO } from "date-fns";
import { addDays } from "@shared/calendar";
import type { Layout } from "@shared/contract/layouts";
import type { LayoutPreview } from "@shared/contract/saved-layouts";
import { readWeek } from "@shared/layouts/read-day";
import { numberReader } from "@shared/layouts/read-number";
import { oursAt } from "./layout-mapping";

type FileColumns = LayoutPreview["fileColumns"];

const dayColumns = ["week", "first_day", "last_day", "opened", "closed", "valid_from"];
const numberColumns = ["net_sales", "units", "regular_price", "shelf_price", "unit_cost", "temperature_c"];

/** The file's own first value of the first of these columns that it has. */
const sampleOf = (layout: Layout, columns: FileColumns, ours: readonly string[], isGood = (_: string) => true): string | null => {
  for (const column of ours) {
    const found = columns.find(({ position }) => oursAt(layout, position) === column)?.samples.find(isGood);
    if (found) return found;
  }
  return null;
};

const longDay = (day: string) => formatDate(parseISO(day), "d MMMM yyyy");

/** "“03/04/2026” is 3 April 2026", by the file's own first day; null where it has none. */
export const dateExample = (layout: Layout, columns: FileColumns): string | null => {
  const sample = sampleOf(layout, columns, dayColumns);
  if (sample === null) return null;
  const reading = readWeek(sample, layout.dateOrder);
  if ("day" in reading) return `“${sample}” is ${longDay(reading.day)}`;
  return "isoWeek" in reading ? `“${sample}” is week ${reading.isoWeek}` : `“${sample}” cannot be read so: ${reading.problem.toLowerCase()}`;
};

/** Which seven days the file's own first week is. */
export const weekExample = (layout: Layout, columns: FileColumns): string | null => {
  const sample = sampleOf(layout, columns, ["week"]);
  if (sample === null) return null;
  const reading = readWeek(sample, layout.dateOrder);
  if (!("day" in reading)) return null;
  const first = layout.weekDay === "last" ? addDays(reading.day, -6) : reading.day;
  return `“${sample}” is the week from ${longDay(first)} to ${longDay(addDays(first, 6))}`;
};

/** "“1.234,50” is 1234.50", by a number of the file's own that shows the signs. */
export const numberExample = (layout: Layout, columns: FileColumns): string | null => {
  const sample = sampleOf(layout, columns, numberColumns, (text) => /\d[.,' ]\d/.test(text)) ?? sampleOf(layout, columns, numberColumns);
  if (sample === null) return null;
  const read = numberReader(layout)(sample);
  return read === null ? `“${sample}” cannot be read so` : `“${sample}” is ${read}`;
};
