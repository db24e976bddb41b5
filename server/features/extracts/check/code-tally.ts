import type { Day } from "@shared/calendar";
import type { UnknownCodes } from "@shared/contract/unknown-codes";

/** Codes of one thing that are listed; how many more there are is known. */
const mostListed = 500;
/** A file that is not what it says can hold a different word in each row: beyond this many, further ones are not counted. */
const mostTold = 250_000;
/** What is longer can be no code. */
const longestCode = 64;
// eslint-disable-next-line no-control-regex -- control characters are what it looks for
const impossible = /[\u0000-\u001f\u007f]/;

type Tally = { rows: number; firstWeek: Day | null; lastWeek: Day | null };

/** Counts the rows that name a code which the catalogue lacks, and notes their first and last week. */
export class CodeTally {
  readonly #tallies = new Map<string, Tally>();

  add(code: string, week: Day | null): void {
    const tally = this.#tallies.get(code);
    if (tally) return count(tally, week);
    if (this.#tallies.size >= mostTold || code.length > longestCode || impossible.test(code) || !code.isWellFormed()) return;
    this.#tallies.set(code, { rows: 1, firstWeek: week, lastWeek: week });
  }

  get total(): number {
    return this.#tallies.size;
  }

  /** Those with most rows first, as many as are listed. */
  listed(): UnknownCodes["stores"] {
    return [...this.#tallies]
      .map(([code, tally]) => ({ code, ...tally }))
      .sort((a, b) => b.rows - a.rows || (a.code < b.code ? -1 : 1))
      .slice(0, mostListed);
  }
}

function count(tally: Tally, week: Day | null): void {
  tally.rows++;
  if (week === null) return;
  if (tally.firstWeek === null || week < tally.firstWeek) tally.firstWeek = week;
  if (tally.lastWeek === null || week > tally.lastWeek) tally.lastWeek = week;
}
