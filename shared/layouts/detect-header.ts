import { shareOf, type Detected } from "./detected";
import { most, typeOfValue } from "./column-profile";

/** Enough rows below the first to know a column's type. */
const mostRows = 100;
const mostFields = 500;

/**
 * Whether the first record names the columns: it has words that are names of the trade, or words where the rows below have
 * numbers and days; against it speaks each number or day that stands in it as it does below.
 *
 * @param isKnownName whether a text is a column's name in the words of the trade
 * @example detectHeader([["week", "units"], ["2026-06-08", "5"]], () => false).value // true
 */
export function detectHeader(records: readonly (readonly string[])[], isKnownName: (text: string) => boolean): Detected<boolean> {
  const [first = [], ...below] = records;
  const rows = below.slice(0, mostRows);
  let [votesFor, votesAgainst] = [0, 0];
  first.slice(0, mostFields).forEach((text, position) => {
    const type = typeOfValue(text);
    if (type === "text" && isKnownName(text)) votesFor += 2;
    else if (type === "text" && isTyped(rows, position)) votesFor++;
    else if (type === "day" || type === "number") votesAgainst += rows.length === 0 || isTyped(rows, position) ? 1 : 0.5;
    else if (type === "text" && rows.some((row) => row[position] === text)) votesAgainst += 0.5;
  });
  if (votesFor === votesAgainst) return undecided(first);
  const share = Math.max(votesFor, votesAgainst) / (votesFor + votesAgainst);
  return { value: votesFor > votesAgainst, confidence: Math.round(Math.max(0.5, share) * 100) / 100, warnings: [] };
}

function isTyped(rows: readonly (readonly string[])[], position: number): boolean {
  const values = rows.map((row) => row[position] ?? "").filter((value) => value.trim() !== "");
  return values.length > 0 && shareOf(values, (value) => ["day", "number"].includes(typeOfValue(value))) >= most;
}

/** Names are all there and differ. */
function undecided(first: readonly string[]): Detected<boolean> {
  const value = first.length > 0 && first.every((text) => text.trim() !== "") && new Set(first).size === first.length;
  const message = `It cannot be told whether the first line names the columns; it is taken as ${value ? "their names" : "a row"}.`;
  return { value, confidence: 0.5, warnings: [{ code: "header-ambiguous", message }] };
}
