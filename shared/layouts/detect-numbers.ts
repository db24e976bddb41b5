import type { NumberFormat, Separator } from "../contract/layouts";
import { most, type ColumnProfile } from "./column-profile";
import type { Detected } from "./detected";
import { numberFormats } from "./read-number";

/**
 * How a file writes numbers, by all its numeric-looking columns together: the format in which most values can be read, with
 * thousands only where some need them. Where "1,234" could be either, lists separated by semicolons are taken to have decimal
 * commas, others decimal points, and a warning says so.
 *
 * @example detectNumbers(profileColumns([["1.234,50"], ["3,25"]], ["price"]), ";").value // { decimal: ",", thousands: "." }
 */
export function detectNumbers(profiles: readonly ColumnProfile[], separator: Separator): Detected<NumberFormat> {
  const values = profiles.filter(isNumeric).flatMap((profile) => profile.values.filter((value) => /[^\d+-]/.test(value)));
  const usual = separator === ";" ? "," : ".";
  const judged = numberFormats.map(({ format, read }) => ({ format, read, readable: values.filter((value) => read(value) !== null).length }));
  const readable = Math.max(...judged.map((one) => one.readable));
  const fitting = judged.filter((one) => one.readable === readable).sort((one, other) => rank(one.format, usual) - rank(other.format, usual));
  const best = fitting[0] ?? judged[0];
  if (!best) throw new Error("There are formats of numbers.");
  const ambiguous = values.find((value) => fitting.some(({ format, read }) => isSimple(format, fitting) && differs(read(value), best.read(value))));
  if (ambiguous !== undefined) return guessed(best.format, ambiguous, best.read(ambiguous));
  const hasMarks = values.length > 0;
  return { value: best.format, confidence: hasMarks ? Math.round((readable / values.length) * 100) / 100 : 0.5, warnings: [] };
}

const isNumeric = ({ numbers, days, gtins, values }: ColumnProfile) => values.length > 0 && numbers >= most && days < most && gtins < most;

/** The usual decimal sign comes first, and no thousands before some. */
function rank({ decimal, thousands }: NumberFormat, usual: string): number {
  return (decimal === usual ? 0 : 2) + (thousands === "" ? 0 : 1);
}

/** Thousands that no value needs are no second reading: of one decimal sign the format without them is enough. */
function isSimple({ decimal, thousands }: NumberFormat, fitting: readonly { format: NumberFormat }[]): boolean {
  return thousands === "" || !fitting.some(({ format }) => format.decimal === decimal && format.thousands === "");
}

const differs = (one: string | null, other: string | null) => one !== null && other !== null && Number(one) !== Number(other);

function guessed(format: NumberFormat, text: string, read: string | null): Detected<NumberFormat> {
  const message = `"${text}" can be read in two ways; it is taken as ${read}. Look whether that is right.`;
  return { value: format, confidence: 0.5, warnings: [{ code: "numbers-ambiguous", message }] };
}
