import type { Separator } from "../contract/layouts";
import { commonest } from "./detect-separator";
import type { Detected } from "./detected";
import { splitRecords } from "./split-records";

/** No report has more lines above its table. */
const mostLinesAbove = 20;
const mostRecords = 200;

/**
 * How many lines stand above the table: titles, dates and blank lines, told by having few of the fields that most records have.
 * Only lines directly above one that has most of them count, so that a first row with many empty values stays a row.
 *
 * @example detectLinesAbove("Sales report\n\na,b,c\n1,2,3\n", { separator: ",", isCut: false }).value // 2
 */
export function detectLinesAbove(text: string, { separator, isCut }: { separator: Separator; isCut: boolean }): Detected<number> {
  const width = commonest(splitRecords(text, { separator, isCut, most: mostRecords }).map(({ length }) => length));
  const lines = text.split(/\r\n|\n|\r/, mostLinesAbove + 1);
  const filled = lines.map((line) => splitRecords(line, { separator }).flat().filter((field) => field.trim() !== "").length);
  const table = filled.findIndex((count) => count > width / 3 && count > 1);
  if (width < 2 || table <= 0 || (filled[table] ?? 0) < 0.6 * width) return { value: 0, confidence: 1, warnings: [] };
  const message = `${table === 1 ? "The first line is" : `The first ${table} lines are`} taken to stand above the table, and passed over.`;
  // Blank lines alone are passed over by every reader.
  const isBlank = filled.slice(0, table).every((count) => count === 0);
  return isBlank ? { value: 0, confidence: 1, warnings: [] } : { value: table, confidence: 0.8, warnings: [{ code: "lines-above-header", message }] };
}
