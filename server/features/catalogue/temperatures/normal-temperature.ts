import { weekIndex, yearFraction, type Day } from "@shared/calendar";

export type WeekTemperature = { week: Day; temperatureC: number };

/** A year has this many weeks on average. */
const weeksInYear = 365.2425 / 7;
/** Weeks of other years count in full at the same time of year, and not at all from this many weeks away. */
const reachWeeks = 3;
/** Nearer weeks than this are of the same year. */
const halfYearWeeks = 26;

/**
 * What is usual in a place at the time of year of a week: the mean of the other years' temperatures at that time,
 * smoothed by a triangle of three weeks to either side (a week counts 1 - distance / 3). Weeks within half a year of the
 * one asked for are of its own year and do not count, so that a hot summer is not its own normal.
 *
 * @param history temperatures known of the place, in any order.
 * @returns a function from a week to its normal temperature; null where no other year covers that time.
 * @example normalTemperature(history)("2026-06-08") // 14.2
 */
export function normalTemperature(history: readonly WeekTemperature[]): (week: Day) => number | null {
  const known = history.map(({ week, temperatureC }) => ({
    index: weekIndex(week),
    place: yearFraction(week),
    temperatureC,
  }));
  return (week) => {
    const index = weekIndex(week);
    const place = yearFraction(week);
    let weight = 0;
    let total = 0;
    for (const other of known) {
      if (Math.abs(other.index - index) <= halfYearWeeks) continue;
      const share = 1 - weeksRound(other.place - place) / reachWeeks;
      if (share <= 0) continue;
      weight += share;
      total += share * other.temperatureC;
    }
    return weight > 0 ? total / weight : null;
  };
}

/** Weeks between two places of the year, the shorter way round. */
function weeksRound(difference: number): number {
  const apart = Math.abs(difference);
  return Math.min(apart, 1 - apart) * weeksInYear;
}

/** Mean of all temperatures known of a place; null where there are none. */
export function meanTemperature(history: readonly WeekTemperature[]): number | null {
  if (history.length === 0) return null;
  return history.reduce((sum, { temperatureC }) => sum + temperatureC, 0) / history.length;
}

/** Lowest and highest of some weeks. */
export type UsualRange = { lowC: number; highC: number };

/** How many weeks to either side of a time of year count for what is usual then. */
const besideWeeks = 1;

/**
 * How cold and how warm the other years were at the time of year of a week, a week to either side; weeks within half a
 * year of it do not count, as for the normal.
 *
 * @param history temperatures known of the place, in any order.
 * @returns a function from a week to its range; null where no other year covers that time.
 * @example usualRange(history)("2026-06-08") // { lowC: 11.8, highC: 16.9 }
 */
export function usualRange(history: readonly WeekTemperature[]): (week: Day) => UsualRange | null {
  const known = history.map(({ week, temperatureC }) => ({ index: weekIndex(week), place: yearFraction(week), temperatureC }));
  return (week) => {
    const [index, place] = [weekIndex(week), yearFraction(week)];
    const beside = known.filter((other) =>
      Math.abs(other.index - index) > halfYearWeeks && weeksRound(other.place - place) < besideWeeks + 0.5);
    if (beside.length === 0) return null;
    const values = beside.map(({ temperatureC }) => temperatureC);
    return { lowC: Math.min(...values), highC: Math.max(...values) };
  };
}
