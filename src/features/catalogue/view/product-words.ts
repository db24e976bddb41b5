import type { ProductTerms } from "@shared/contract/catalogue-products";
import type { ChainFormat } from "@/lib/format/chain-format";

/** Files that give no day mean from the beginning. */
export const beginning = "1970-01-01";

/** From when terms hold, as people say it. */
export const fromWords = ({ validFrom }: Pick<ProductTerms, "validFrom">, format: ChainFormat): string =>
  validFrom === beginning ? "the beginning" : format.day(validFrom);

/** A tax rate with a decimal where it has one: "7 %", "5.5 %". */
export const taxWords = (rate: number, format: ChainFormat): string => format.percent(rate, { digits: Math.round(rate * 1000) % 10 === 0 ? 0 : 1 });

/** A price or cost with the decimals it has, at least two. */
export const exactMoney = (amount: number | null, format: ChainFormat): string =>
  format.money(amount, { digits: Math.max(2, String(amount ?? 0).split(".")[1]?.length ?? 0) });
