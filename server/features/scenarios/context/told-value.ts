import { addDays, type Day } from "@shared/calendar";
import type { Terms, ToldBySales } from "./planned-weeks.repository";

type Told = "regularPrice" | "unitCost";

/** The terms in force on a week's middle day. */
export function termsOf(terms: readonly Terms[], week: Day): Terms | undefined {
  const middle = addDays(week, 3);
  return terms.findLast(({ validFrom }) => validFrom <= middle);
}

/**
 * A store's regular price or cost in a week: the newest of what its sales told up to that week and the product's terms in
 * force, so that a change the chain has announced goes before last week's price, and a store's own price before terms
 * that are older.
 *
 * @param rows what sales told of one store, by week.
 * @param terms oldest first.
 * @returns null where neither says.
 */
export function toldValue(
  { rows, terms, week, what }: { rows: readonly ToldBySales[]; terms: readonly Terms[]; week: Day; what: Told },
): number | null {
  const row = rows.findLast((each) => each.week <= week && each[what] !== null);
  const inForce = termsOf(terms, week);
  const announced = inForce?.[what] ?? null;
  if (!row) return announced;
  const isNewer = announced !== null && inForce !== undefined && inForce.validFrom > addDays(row.week, 3);
  return isNewer ? announced : row[what];
}
