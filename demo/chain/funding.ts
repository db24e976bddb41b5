import { addDays, addWeeks, type Day } from "@shared/calendar";
import type { FundingRow } from "../types";

type Agreed = {
  product: string;
  /** Weeks since the first week of the three years; beyond the last are those agreed for coming weeks. */
  fromWeek: number;
  weeks: number;
  perUnit: number;
  lumpSum: number;
};

/** What suppliers have agreed to give: for the summers of drinks and ice cream, and for a few weeks of others. */
const agreed: Agreed[] = [
  { product: "P102", fromWeek: 52, weeks: 13, perUnit: 0.06, lumpSum: 0 },
  { product: "P102", fromWeek: 104, weeks: 13, perUnit: 0.07, lumpSum: 0 },
  { product: "P102", fromWeek: 156, weeks: 13, perUnit: 0.08, lumpSum: 0 },
  { product: "P201", fromWeek: 105, weeks: 6, perUnit: 0.2, lumpSum: 1_200 },
  { product: "P201", fromWeek: 157, weeks: 6, perUnit: 0.22, lumpSum: 1_500 },
  { product: "P301", fromWeek: 74, weeks: 4, perUnit: 0.35, lumpSum: 0 },
  { product: "P301", fromWeek: 126, weeks: 4, perUnit: 0.4, lumpSum: 0 },
  { product: "P601", fromWeek: 158, weeks: 4, perUnit: 0.5, lumpSum: 2_000 },
];

/** Suppliers' contributions, by product and first day. */
export function fundingFrom(firstWeek: Day): FundingRow[] {
  return agreed.map(({ product, fromWeek, weeks, perUnit, lumpSum }) => {
    const firstDay = addWeeks(firstWeek, fromWeek);
    return { product, firstDay, lastDay: addDays(addWeeks(firstDay, weeks), -1), perUnit, lumpSum };
  });
}
