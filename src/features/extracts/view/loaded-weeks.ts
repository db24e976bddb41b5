import { weeksApart } from "@shared/calendar";
import type { LoadedWeeks } from "@shared/contract/extracts";
import type { ChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";

/** Stretches named at once; the others are counted. */
const mostNamed = 3;

/** Which week is expected next and which are missing, in a line; null where nothing is loaded yet. */
export const loadedWeeksLine = (weeks: LoadedWeeks, format: ChainFormat): string | null => {
  const { last, expected, overdue } = weeks;
  if (last === null || expected === null) return null;
  return [
    `Sales are loaded to ${format.weekSpan(last, last)}.`,
    `Expected next: ${format.weekSpan(expected, expected)} (${format.weekDays(expected)})${endOf(overdue)}.`,
    ...(weeks.missing.length > 0 ? [`Missing in between: ${missingOf(weeks.missing, format)}.`] : []),
  ].join(" ");
};

const endOf = (overdue: number): string => {
  if (overdue === 0) return ", which has not ended yet";
  if (overdue === 1) return ", which has ended";
  return `; ${countOf(overdue, "week")} have ended that are not loaded`;
};

const missingOf = (missing: readonly string[], format: ChainFormat): string => {
  const stretches = stretchesOf(missing);
  const named = stretches.slice(0, mostNamed);
  const more = stretches.slice(mostNamed).reduce((sum, stretch) => sum + stretch.length, 0);
  const texts = named.map((stretch) => format.weekSpan(stretch[0], stretch[stretch.length - 1]));
  return `${texts.join("; ")}${more > 0 ? `; and ${countOf(more, "more week", "more weeks")}` : ""}`;
};

/** Weeks that follow each other, together. */
const stretchesOf = (weeks: readonly string[]): string[][] => {
  const stretches: string[][] = [];
  for (const week of weeks) {
    const open = stretches.at(-1);
    if (open && weeksApart(open[open.length - 1], week) === 1) open.push(week);
    else stretches.push([week]);
  }
  return stretches;
};
