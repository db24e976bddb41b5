import type { PastWeek } from "@/components/charts/week-bars/week-layout";
import { addWeeks, weeksApart, weeksBetween } from "@shared/calendar";
import type { PlanningContext } from "../api/planning-context";

/** Weeks between the last recorded and the plan are drawn up to as many as leave room for both. */
const mostWeeksAhead = 13;

type Shown = { before: string | undefined; name: (week: string) => Pick<PastWeek, "label" | "year"> };

/**
 * Units of all the scenario's stores week by week up to the plan; a week nobody recorded stays a gap, also between the
 * last recorded and the plan's first, unless those are too many to draw.
 */
export function pastWeeks(history: PlanningContext["history"], { before, name }: Shown): PastWeek[] {
  if (history.length === 0) return [];
  const units = new Map<string, number>();
  for (const row of history) units.set(row.week, (units.get(row.week) ?? 0) + row.units);
  const recorded = [...units.keys()].sort();
  const newest = recorded[recorded.length - 1];
  const ahead = before === undefined || before <= newest ? 0 : weeksApart(newest, before) - 1;
  const last = ahead > mostWeeksAhead ? newest : addWeeks(newest, ahead);
  return weeksBetween(recorded[0], last).map((week) => ({ week, ...name(week), units: units.get(week) ?? null }));
}

/** The lowest price in the weeks that touch the last 30 days before the plan: what a stated reduction is held against. */
export function lowestRecentPrice(history: PlanningContext["history"], firstPlanWeek: string): number | null {
  const newest = weeksBetween(history.reduce((first, row) => (row.week < first ? row.week : first), firstPlanWeek), firstPlanWeek)
    .slice(0, -1)
    .slice(-5);
  const prices = history.filter((row) => newest.includes(row.week)).flatMap((row) => row.price ?? []);
  return prices.length === 0 ? null : Math.min(...prices);
}
