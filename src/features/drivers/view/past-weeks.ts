import { weeksBetween } from "@shared/calendar";
import type { SalesWeek } from "@shared/contract/drivers";
import type { PastWeek } from "@/components/charts/week-bars/week-layout";

type WeekName = Pick<PastWeek, "label" | "year">;

/** Every week from the first to the last recorded; one that is missing stays a gap. */
export const pastWeeks = (sales: readonly SalesWeek[], name: (week: string) => WeekName): PastWeek[] => {
  if (sales.length === 0) return [];
  const units = new Map(sales.map((row) => [row.week, row.units]));
  const recorded = [...units.keys()].sort();
  return weeksBetween(recorded[0], recorded[recorded.length - 1]).map((week) => ({
    week,
    ...name(week),
    units: units.get(week) ?? null,
  }));
};

/** The regular price of the newest week that has one. */
export const newestRegularPrice = (sales: readonly SalesWeek[]): number | null =>
  sales.reduce<SalesWeek | null>(
    (newest, row) => (row.regularPrice !== null && (newest === null || row.week > newest.week) ? row : newest),
    null,
  )?.regularPrice ?? null;

/** The middle value; the lower of the two middles where there are two. */
export const medianOf = (values: readonly number[]): number | null =>
  values.length === 0 ? null : [...values].sort((a, b) => a - b)[Math.floor((values.length - 1) / 2)];
