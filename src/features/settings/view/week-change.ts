import { weekdayNames } from "@shared/calendar";
import type { Chain } from "@shared/contract/chain";
import { capitalised } from "@/lib/format/capitalised";

type Weeks = Pick<Chain, "calendar" | "weekStart">;

const dayName = (day: number) => capitalised(weekdayNames[day] ?? "");

/** What follows from other weeks than the chain has now; empty where they stay. */
export const weekChangeConsequences = (now: Weeks, next: Weeks): string[] => {
  const consequences: string[] = [];
  if (next.weekStart !== now.weekStart) {
    consequences.push(
      `Files must give weeks that begin on ${dayName(next.weekStart)} from now on; one that begins on ${dayName(now.weekStart)} is refused.`,
      "Sales that are loaded keep the weeks they came with. Load them again by the new weeks if history is to line up with what comes.",
    );
  }
  if (next.calendar !== now.calendar) {
    consequences.push("Weeks and years are numbered anew on every page, also those that have passed.");
  }
  return consequences;
};
