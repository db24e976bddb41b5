import { unusable, type ProblemError } from "../../../errors";

/** Days from one to another; an open end goes on. */
export type Days = { firstDay: string; lastDay?: string | null };

/** Whether two spans of days share one. */
export function overlap(one: Days, other: Days): boolean {
  return (other.lastDay == null || one.firstDay <= other.lastDay) && (one.lastDay == null || other.firstDay <= one.lastDay);
}

/** Some days in words: "from 2026-01-05 to 2026-03-01". */
export const daysInWords = ({ firstDay, lastDay }: Days) => (lastDay == null ? `from ${firstDay} on` : `from ${firstDay} to ${lastDay}`);

/** What whoever ends something before it begins is told. */
export function lastBeforeFirst(): ProblemError {
  const message = "The last day lies before the first.";
  return unusable("last-before-first", message, [{ path: "lastDay", message }]);
}

type Wanted = { days: Days; others: readonly Days[]; path: string; says: (days: string) => string };

/** @throws ProblemError 422 that names the field and the first of the others that shares a day. */
export function requireNoOverlap({ days, others, path, says }: Wanted): void {
  const shared = others.find((other) => overlap(days, other));
  if (!shared) return;
  const message = says(daysInWords(shared));
  throw unusable("overlapping-days", message, [{ path, message }]);
}
