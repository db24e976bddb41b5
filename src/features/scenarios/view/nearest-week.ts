import { yearFraction } from "@shared/calendar";

/** Distance of two year fractions on the year's circle. */
const apart = (one: number, other: number) => {
  const distance = Math.abs(one - other) % 1;
  return Math.min(distance, 1 - distance);
};

/**
 * The plan week nearest to a place on the year's circle. A small step off the present week goes to its neighbour in that
 * direction, so that an arrow key always moves on, also across the end of a year.
 */
export function nearestWeek(weeks: readonly string[], { fraction, from }: { fraction: number; from: string }): string {
  const nearest = weeks.reduce((best, week) =>
    apart(yearFraction(week), fraction) < apart(yearFraction(best), fraction) - 1e-9 ? week : best,
  );
  if (nearest !== from) return nearest;
  const step = fraction - yearFraction(from);
  if (Math.abs(step) < 0.5 / 53) return from;
  return weeks[weeks.indexOf(from) + Math.sign(step)] ?? from;
}
