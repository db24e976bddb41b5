import type { ExtractChanges } from "@shared/contract/extracts";
import { ProblemError } from "../../../errors";

/** A week of a file beside what is loaded of the stores that the file names. */
export type WeekBeside = ExtractChanges["weeks"][number] & { loadedRows: number; loadedUnits: number };

/** A week of which nothing is loaded yet, beside the mean of those before it, in the stores that have all of them. */
export type NewWeekBeside = { week: string; stores: number; units: number; weeksBefore: number; meanBefore: number };

/** Even where the chain is stricter, a new week may differ by so much: weeks do. */
const leastShareOfNewWeek = 0.5;
/** Weeks named one by one for one reason. */
const mostNamed = 3;

const count = new Intl.NumberFormat("en-GB", { maximumFractionDigits: 1 });
const percent = new Intl.NumberFormat("en-GB", { style: "percent", maximumFractionDigits: 0 });
const difference = new Intl.NumberFormat("en-GB", { style: "percent", maximumFractionDigits: 0, signDisplay: "always" });

/**
 * Why a load must be confirmed in so many words: a loaded week's units change by more than a share of them, more than that
 * share of its rows is not in the file, or a new week is unlike those before it.
 *
 * @param share of the chain's settings, 0 to 1.
 */
export function secondLookReasons({ weeks, newWeeks, share }: { weeks: readonly WeekBeside[]; newWeeks: readonly NewWeekBeside[]; share: number }): string[] {
  const ofNewWeek = Math.max(leastShareOfNewWeek, share);
  return [
    ...told(weeks.filter((week) => week.loadedRows > 0 && isFar(unitsAfter(week), week.loadedUnits, share)), {
      sentence: (week) => `Week ${week.week}: units go from ${count.format(week.loadedUnits)} to ${count.format(unitsAfter(week))}${differenceOf(unitsAfter(week), week.loadedUnits)}.`,
      more: (weeksMore) => `In ${weeksMore} more, units change by more than ${percent.format(share)}.`,
    }),
    ...told(weeks.filter(({ missing, loadedRows }) => missing > share * loadedRows), {
      sentence: ({ week, missing, loadedRows }) => `Week ${week}: ${count.format(missing)} of ${rows(loadedRows)} loaded (${percent.format(missing / loadedRows)}) ${missing === 1 ? "is" : "are"} not in the file.`,
      more: (weeksMore) => `In ${weeksMore} more, more than ${percent.format(share)} of the rows loaded are not in the file.`,
    }),
    ...told(newWeeks.filter(({ units, meanBefore }) => isFar(units, meanBefore, ofNewWeek)), {
      sentence: (week) => `Week ${week.week} is new and has ${count.format(week.units)} units in ${stores(week.stores)}; the ${week.weeksBefore} before it have ${count.format(week.meanBefore)} on average there${differenceOf(week.units, week.meanBefore)}.`,
      more: (weeksMore) => `${weeksMore} more are new and differ from those before by more than ${percent.format(ofNewWeek)}.`,
    }),
  ];
}

/** Units of the stores named once the file is loaded: rows that it lacks stay. */
const unitsAfter = ({ loadedUnits, unitsBefore, unitsAfter: ofFile }: WeekBeside) => loadedUnits - unitsBefore + ofFile;

/** Sums of units are not exact: a difference of less than the last decimal is none. */
const isFar = (value: number, from: number, share: number) => Math.abs(value - from) > share * Math.abs(from) + 0.0005;

const differenceOf = (value: number, from: number) => (from === 0 ? "" : ` (${difference.format((value - from) / Math.abs(from))})`);

const rows = (number: number) => (number === 1 ? "1 row" : `${count.format(number)} rows`);
const stores = (number: number) => (number === 1 ? "1 store" : `${count.format(number)} stores`);

function told<Week>(weeks: readonly Week[], { sentence, more }: { sentence: (week: Week) => string; more: (weeks: string) => string }): string[] {
  const named = weeks.slice(0, mostNamed).map(sentence);
  const rest = weeks.length - named.length;
  return rest === 0 ? named : [...named, more(rest === 1 ? "1 week" : `${count.format(rest)} weeks`)];
}

/** What a load is refused by that nobody has looked at a second time. */
export function secondLookNeeded(reasons: readonly string[]): ProblemError {
  const detail = `This load changes more than usual. ${reasons.join(" ")} Look at what it changes, and confirm it where it is right.`;
  return new ProblemError({ status: 409, code: "second-look-needed", detail });
}

/** The same, found when the load was about to begin: what it would change now is to be kept for those who look. */
export class SecondLookNeeded extends Error {
  readonly changes: ExtractChanges;

  constructor(changes: ExtractChanges) {
    super("The load needs a second look.");
    this.name = "SecondLookNeeded";
    this.changes = changes;
  }
}
