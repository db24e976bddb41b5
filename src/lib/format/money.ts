import { minus, missing } from "./glyphs";
import { numberFormat } from "./number";

export type MoneyOptions = { currency: string; locale?: string; digits?: number; signed?: boolean };

/** Money in the chain's currency, whole by default: "€15,213", "−€212", "+€7,677" (when signed). */
export const formatMoney = (amount: number | null | undefined, options: MoneyOptions): string => {
  if (amount === null || amount === undefined || !Number.isFinite(amount)) return missing;
  const { currency, locale = "en-GB", digits = 0, signed = false } = options;
  const text = numberFormat(locale, {
    style: "currency",
    currency,
    currencyDisplay: "narrowSymbol",
    minimumFractionDigits: digits,
    maximumFractionDigits: digits,
  }).format(Math.abs(amount));
  if (!/[1-9]/.test(text)) return text;
  return amount < 0 ? `${minus}${text}` : signed ? `+${text}` : text;
};

/** Decimals of a currency's coins: 2 for EUR, 0 for JPY. */
export const currencyDigits = (currency: string, locale = "en-GB"): number =>
  numberFormat(locale, { style: "currency", currency }).resolvedOptions().maximumFractionDigits ?? 2;

/** A shelf price, in the currency's own number of decimals: "€1.49". */
export const formatPrice = (price: number | null | undefined, options: Omit<MoneyOptions, "digits">): string => {
  const { currency, locale = "en-GB" } = options;
  return formatMoney(price, { ...options, digits: currencyDigits(currency, locale) });
};
