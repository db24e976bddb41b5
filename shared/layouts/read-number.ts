import type { NumberFormat } from "../contract/layouts";

/** No number of a sales file has more characters. */
const longestNumber = 40;
/** Every blank that sets thousands apart, and every sign used as an apostrophe there. */
const blanks = /[\u0020\u00a0\u2009\u202f]/g;
const apostrophes = /[\u2019\u02bc]/g;
const currency = /^(?:[$€£¥₪₺]|CHF|EUR|USD|GBP)\s*|\s*(?:[$€£¥₪₺]|CHF|EUR|USD|GBP|kr\.?|zł)$/gi;

/** Reads a number written in one format; null where the text is none. */
export type NumberReader = (text: string) => string | null;

/**
 * A reader of numbers in a format. It answers the number as we write it: a point for decimals, a minus in front, nothing
 * else. Thousands must stand in threes, so that a mistaken format is found and not read as another number; a currency sign is
 * passed over, and a minus may stand behind.
 *
 * @example numberReader({ decimal: ",", thousands: "." })("1.234,50 €") // "1234.50"
 */
export function numberReader({ decimal, thousands }: NumberFormat): NumberReader {
  const mark = decimal === "." ? "\\." : ",";
  const apart = thousands === "." ? "\\." : thousands;
  const whole = apart ? `(?:\\d+|[1-9]\\d{0,2}(?:${apart}\\d{3})+)` : "\\d+";
  const pattern = new RegExp(`^(${whole})(?:${mark}(\\d*))?$|^${mark}(\\d+)$`);
  const simple = decimal === "." ? /^-?\d{1,15}\.\d{1,9}$/ : /^-?\d{1,15},\d{1,9}$/;
  return (text) => {
    if (plainWhole.test(text)) return text;
    // Nearly every number of a file is one of these two.
    if (simple.test(text)) return decimal === "." ? text : text.replace(",", ".");
    if (text.length > longestNumber) return null;
    const { sign, digits } = withoutSign(plainSigns(text));
    const parts = pattern.exec(digits);
    if (!parts) return null;
    const integer = parts[1] === undefined ? "0" : apart ? parts[1].replaceAll(thousands, "") : parts[1];
    const decimals = parts[2] ?? parts[3] ?? "";
    return `${sign}${integer}${decimals && "."}${decimals}`;
  };
}

const plainWhole = /^\d{1,15}$/;

function plainSigns(text: string): string {
  return text.trim().replace(currency, "").trim().replace(blanks, " ").replace(apostrophes, "'").replace(/^\u2212/, "-");
}

/** "-5", "- 5", "+5" and "5-". */
function withoutSign(text: string): { sign: "-" | ""; digits: string } {
  if (text.startsWith("-")) return { sign: "-", digits: text.slice(1).trimStart() };
  if (text.endsWith("-")) return { sign: "-", digits: text.slice(0, -1).trimEnd() };
  return { sign: "", digits: text.startsWith("+") ? text.slice(1) : text };
}

const decimals = [".", ","] as const;
const thousandsSigns = ["", ",", ".", " ", "'"] as const;

/** Every way in which numbers can be written, with its reader; those without thousands first. */
export const numberFormats: readonly { format: NumberFormat; read: NumberReader }[] = thousandsSigns.flatMap((thousands) =>
  decimals
    .filter((decimal) => decimal !== thousands)
    .map((decimal) => ({ format: { decimal, thousands }, read: numberReader({ decimal, thousands }) })),
);

/** Whether a text is a number in one format or another. */
export const isNumberLike = (text: string): boolean => plainWhole.test(text) || numberFormats.some(({ read }) => read(text) !== null);
