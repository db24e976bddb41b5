import { isGtin } from "@shared/layouts";
import type { Column } from "./row";

const eightDigits = /^\d{8}$/;
const longer = /^\d{12,14}$/;

/** The GTIN in a column, or null: empty, or reported where it is none. */
export function gtinOf(column: Column): string | null {
  const value = column.raw;
  if (value === "") return null;
  if (!eightDigits.test(value) && !longer.test(value)) return column.report("bad-gtin");
  return isGtin(value) ? value : reportCheckDigit(column);
}

/** Whether a code must be a mistyped GTIN: so many digits are no chain's own code, but the last does not go with them. */
export const isMistypedGtin = (code: string): boolean => longer.test(code) && !isGtin(code);

export function reportCheckDigit(column: Column): null {
  const { raw } = column;
  const right = "0123456789".split("").find((digit) => isGtin(raw.slice(0, -1) + digit));
  return column.report("gtin-check-digit", { reason: `By GS1's rule the GTIN's last digit would be ${right}, not ${raw.slice(-1)}` });
}
