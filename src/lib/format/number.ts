import { enDash, minus, missing, thinSpace, times } from "./glyphs";

const formatters = new Map<string, Intl.NumberFormat>();

/** Intl formatters are costly to make and are asked for on every frame while dragging. */
export const numberFormat = (locale: string, options: Intl.NumberFormatOptions): Intl.NumberFormat => {
  const key = `${locale} ${JSON.stringify(options)}`;
  const known = formatters.get(key);
  if (known) return known;
  const made = new Intl.NumberFormat(locale, options);
  formatters.set(key, made);
  return made;
};

export type NumberOptions = { locale?: string; digits?: number; signed?: boolean };

/** A number with grouping: 10,210 · −0.4 · +767 (when signed). What rounds to zero carries no sign. */
export const formatNumber = (value: number | null | undefined, options: NumberOptions = {}): string => {
  if (value === null || value === undefined || !Number.isFinite(value)) return missing;
  const { locale = "en-GB", digits = 0, signed = false } = options;
  const text = numberFormat(locale, { minimumFractionDigits: digits, maximumFractionDigits: digits }).format(
    Math.abs(value),
  );
  const isZero = !/[1-9]/.test(text);
  if (isZero) return text;
  return value < 0 ? `${minus}${text}` : signed ? `+${text}` : text;
};

/** Units: whole, or with a decimal where a whole number would hide the matter (below ten). */
export const formatUnits = (value: number | null | undefined, options: Omit<NumberOptions, "digits"> = {}): string => {
  const small = typeof value === "number" && Math.abs(value) < 10 && !Number.isInteger(value);
  return formatNumber(value, { ...options, digits: small ? 1 : 0 });
};

/** "× 1.52"; three figures where the multiplier is below a tenth. */
export const formatMultiplier = (value: number | null | undefined, options: NumberOptions = {}): string => {
  if (value === null || value === undefined || !Number.isFinite(value)) return missing;
  const digits = options.digits ?? (Math.abs(value) < 0.1 ? 3 : Math.abs(value) >= 10 ? 1 : 2);
  return `${times}${thinSpace}${formatNumber(value, { ...options, digits })}`;
};

/** "9,150 – 11,380" */
export const formatRange = (lower: string, upper: string): string =>
  `${lower}${thinSpace}${enDash}${thinSpace}${upper}`;

/** "1 row", "2,316 rows" */
export const countOf = (count: number, one: string, many = `${one}s`): string =>
  `${formatNumber(count)} ${count === 1 ? one : many}`;
