import { parseNumber } from "@/lib/format/parse-number";

/** Reads a price as typed: an amount, or a change on the regular price such as "−20 %". Null for what is neither. */
export function readPrice(text: string, regular: number): number | null {
  const value = parseNumber(text);
  if (value === null || !text.includes("%")) return value;
  // "20 %" alone could mean the price or the reduction.
  return /[-+\u2212\u2013]/.test(text) ? regular * (1 + value / 100) : null;
}
