import { most, type ColumnProfile } from "./column-profile";
import { columnType, type ColumnType } from "./column-types";
import { columnWords } from "./column-words";
import { shareOf } from "./detected";
import { normalName } from "./normal-name";
import { isYearAndWeek } from "./read-day";
import type { WordReader } from "./read-words";

export type Proposal = { position: number; column: string; score: number; why: string };

/** What a proposal is worth; the higher is taken first. */
const worth = { ourName: 1, knownName: 0.9, partOfName: 0.6 };
/** For a word to be found inside a longer name it must have some length. */
const shortestPart = 4;

/**
 * Columns of ours for the columns of a file, by their names: our own name, else a word of the trade, else a name that holds
 * one. A column whose values are of another kind is not proposed. Each column is given once, the surest first.
 */
export function proposeByName(profiles: readonly ColumnProfile[], { columns, words }: { columns: readonly string[]; words: WordReader }): Proposal[] {
  const targets = columns.map((column) => ({ column, ours: normalName(column), known: wordsFor(column, columns) }));
  const candidates = profiles.flatMap((profile) =>
    targets
      .map((target) => ({ position: profile.position, column: target.column, ...nameFit(profile.name, target) }))
      .filter(({ score, column }) => score > 0 && canHold(profile, column, words)),
  );
  return chooseOnce(candidates, []);
}

/** Takes proposals, the surest first, so that no column of theirs or ours is given twice. */
export function chooseOnce(candidates: readonly Proposal[], taken: readonly Proposal[]): Proposal[] {
  const chosen: Proposal[] = [];
  const isFree = (candidate: Proposal) =>
    [...taken, ...chosen].every(({ position, column }) => position !== candidate.position && column !== candidate.column);
  for (const candidate of [...candidates].sort((one, other) => other.score - one.score)) {
    if (isFree(candidate)) chosen.push(candidate);
  }
  return chosen;
}

/** A test for whether a text is a name of one of the columns, in the words of the trade. */
export function knownNames(columns: readonly string[]): (text: string) => boolean {
  const names = new Set(columns.flatMap((column) => [normalName(column), ...wordsFor(column, columns)]).map(runTogether));
  return (text) => names.has(runTogether(normalName(text)));
}

/** "weekending", "WeekEnding" and "week ending" are one name, as are "MwSt" and "mwst". */
const runTogether = (name: string) => name.replaceAll(" ", "");

type Target = { column: string; ours: string; known: readonly string[] };

function nameFit(theirs: string, { ours, known }: Target): { score: number; why: string } {
  const name = normalName(theirs);
  if (name === "") return { score: 0, why: "" };
  const isSame = (word: string) => runTogether(word) === runTogether(name);
  if (isSame(ours)) return { score: worth.ourName, why: "It has our name" };
  if (known.some(isSame)) return { score: worth.knownName, why: `"${theirs.trim()}" is a usual name for it` };
  const part = known.filter((word) => word.length >= shortestPart && ` ${name} `.includes(` ${word} `)).sort((one, other) => other.length - one.length)[0];
  // The longer the part, the surer; never as sure as a whole name.
  return part ? { score: worth.partOfName + Math.min(part.length, 25) / 100, why: `Its name has "${part}" in it` } : { score: 0, why: "" };
}

/** Where a kind of file has fewer columns of ours, some words mean others: a product's only price is the regular one. */
function wordsFor(column: string, columns: readonly string[]): readonly string[] {
  const own = columnWords[column] ?? [];
  if (column === "product" && columns.includes("gtin")) return own.filter((word) => !columnWords.gtin?.includes(word));
  if (column === "regular_price" && !columns.includes("shelf_price")) return [...own, ...(columnWords.shelf_price ?? [])];
  return own;
}

/** Whether most of a column's values can be what a column of ours holds; an empty column can be anything. */
function canHold(profile: ColumnProfile, column: string, words: WordReader): boolean {
  if (profile.values.length === 0) return true;
  const isMost = (holds: (value: string) => boolean) => shareOf(profile.values, holds) >= most;
  const tests: Record<ColumnType, () => boolean> = {
    week: () => profile.days >= most || profile.serialDays >= most || isMost(isYearAndWeek),
    day: () => profile.days >= most || profile.serialDays >= most,
    number: () => profile.numbers >= most && profile.days < most,
    share: () => isMost((value) => /^[\d.,]+\s*%?$/.test(value)),
    flag: () => isMost((value) => words.flag(value) !== null),
    // Words that nobody knows yet can be learnt; numbers and days cannot.
    mechanic: () => profile.numbers < most || profile.values.every((value) => words.mechanic(value) !== null),
    promotion: () => profile.numbers < most || profile.values.every((value) => words.promotion(value) !== null),
    text: () => profile.days < most,
  };
  return tests[columnType(column)]();
}
