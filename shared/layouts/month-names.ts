import { normalName } from "./normal-name";

/** English, German, French, Spanish and Dutch names of the months, by their beginnings. */
const beginnings = [
  "jan ene", "feb fev", "mar maart mrt mae maerz", "apr avr abr", "may mai mei", "jun juin", "jul juil", "aug aou ago", "sep", "oct okt", "nov", "dec dez dic",
].map((names) => names.split(" "));

/**
 * The number of a month by its name or a beginning of it; null for a word that is none.
 *
 * @example monthOf("März") // 3
 */
export function monthOf(word: string): number | null {
  const name = normalName(word);
  const longest = Math.max(0, ...beginnings.flat().filter((beginning) => name.startsWith(beginning)).map(({ length }) => length));
  const month = beginnings.findIndex((names) => names.some((beginning) => beginning.length === longest && name.startsWith(beginning)));
  return longest === 0 ? null : month + 1;
}
