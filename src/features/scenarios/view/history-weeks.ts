import type { PastWeek } from "@/components/charts/week-bars/week-layout";
import { weeksBetween } from "@shared/calendar";
import type { PlanningContext } from "../api/planning-context";

/** Units of all the scenario's stores week by week before the plan; a week nobody recorded stays a gap. */
export function pastWeeks(history: PlanningContext["history"], label: (week: string) => string): PastWeek[] {
  if (history.length === 0) return [];
  const units = new Map<string, number>();
  for (const row of history) units.set(row.week, (units.get(row.week) ?? 0) + row.units);
  const weeks = [...units.keys()].sort();
  return weeksBetween(weeks[0], weeks[weeks.length - 1]).map((week) => ({ week, label: label(week), units: units.get(week) ?? null }));
}

/** The lowest price in the weeks that touch the last 30 days before the plan: what a stated reduction is held against. */
export function lowestRecentPrice(history: PlanningContext["history"], firstPlanWeek: string): number | null {
  const newest = weeksBetween(history.reduce((first, row) => (row.week < first ? row.week : first), firstPlanWeek), firstPlanWeek)
    .slice(0, -1)
    .slice(-5);
  const prices = history.filter((row) => newest.includes(row.week)).flatMap((row) => row.price ?? []);
  return prices.length === 0 ? null : Math.min(...prices);
}
