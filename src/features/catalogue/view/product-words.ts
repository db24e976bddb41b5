import type { ProductTerms } from "@shared/contract/catalogue-products";
import type { ChainFormat } from "@/lib/format/chain-format";
import { beginning } from "./change-words";

/** From when terms hold, as people say it. */
export const fromWords = ({ validFrom }: Pick<ProductTerms, "validFrom">, format: ChainFormat): string =>
  validFrom === beginning ? "the beginning" : format.day(validFrom);

/** A price or cost with the decimals it has, at least two. */
export const exactMoney = (amount: number | null, format: ChainFormat): string =>
  format.money(amount, { digits: Math.max(2, String(amount ?? 0).split(".")[1]?.length ?? 0) });
