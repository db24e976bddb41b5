import { lastDayOfWeek, type Day } from "@shared/calendar";
import type { CoverageState } from "@shared/contract/coverage";

/** Of a week with less than this share of the rows usual for the store, something seems to be lacking. */
const thinShare = 0.5;

type Opening = { opened: Day | null; closed: Day | null };
type Counted = { rowCount: number; isRestated: boolean };

/** Rows that are usual for a store in a week: the median over its weeks that have any; 0 where none has. */
export function usualRows(rowCounts: readonly number[]): number {
  const ordered = rowCounts.filter((rows) => rows > 0).sort((one, other) => one - other);
  const middle = ordered.length >> 1;
  const upper = ordered[middle] ?? 0;
  return ordered.length % 2 === 1 ? upper : ((ordered[middle - 1] ?? upper) + upper) / 2;
}

/** Whether a store was shut on all days of the week: not yet opened, or closed for good. */
export function isClosed({ opened, closed }: Opening, week: Day): boolean {
  return (opened !== null && lastDayOfWeek(week) < opened) || (closed !== null && week > closed);
}

/** How a store stands in a week, by what is counted of it; rows are told even where the store should have been shut. */
export function stateOf(counted: Counted | undefined, { week, store, usual }: { week: Day; store: Opening; usual: number }): CoverageState {
  if (counted && counted.rowCount > 0) {
    if (counted.rowCount < thinShare * usual) return "thin";
    return counted.isRestated ? "restated" : "there";
  }
  if (counted) return "withdrawn";
  return isClosed(store, week) ? "closed" : "missing";
}
