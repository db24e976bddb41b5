import type { WordLists } from "../contract/layouts";

/** What the words of a file mean: every reader answers null for a word it does not know. */
export type WordReader = {
  flag: (text: string) => "0" | "1" | null;
  mechanic: (text: string) => string | null;
  promotion: (text: string) => Promotion | null;
};

export type Promotion = { feature: "0" | "1"; display: "0" | "1"; mechanic: string };

const mechanics = ["price_cut", "multi_buy", "coupon", "other"] as const;
const meanings = ["none", "feature", "display", "feature_and_display", ...mechanics] as const;
type Meaning = (typeof meanings)[number];

const plain = (word: string) => word.trim().toLowerCase().normalize("NFC");

/**
 * Readers of a layout's words, in any case. Our own words are always known. A promotion of several words joined by + & / , or ;
 * is read word by word where it is not in a list as a whole; of two mechanics the one named first counts.
 *
 * @example wordReader(words).promotion("Feature + 3 for 2") // { feature: "1", display: "0", mechanic: "multi_buy" }
 */
export function wordReader(words: WordLists): WordReader {
  const flags = new Map<string, "0" | "1">([["", "0"]]);
  for (const word of ["0", ...words.no]) flags.set(plain(word), "0");
  for (const word of ["1", ...words.yes]) flags.set(plain(word), "1");
  const promotions = new Map<string, Meaning>([["", "none"]]);
  for (const meaning of meanings) for (const word of [meaning, ...words[meaning]]) promotions.set(plain(word), meaning);
  return {
    flag: (text) => flags.get(plain(text)) ?? null,
    mechanic: (text) => mechanicOf(promotions.get(plain(text))),
    promotion: remembered((text) => promotionOf(text, promotions)),
  };
}

function mechanicOf(meaning: Meaning | undefined): string | null {
  if (meaning === undefined) return null;
  return meaning === "none" || isMechanic(meaning) ? meaning : null;
}

const isMechanic = (meaning: Meaning): boolean => mechanics.some((mechanic) => mechanic === meaning);

function promotionOf(text: string, promotions: ReadonlyMap<string, Meaning>): Promotion | null {
  const whole = promotions.get(plain(text));
  const parts = whole ? [whole] : text.split(/[+&/,;]/).map((part) => promotions.get(plain(part)));
  if (parts.some((part) => part === undefined)) return null;
  const has = (meaning: Meaning) => parts.includes(meaning) || parts.includes("feature_and_display");
  return {
    feature: has("feature") ? "1" : "0",
    display: has("display") ? "1" : "0",
    mechanic: parts.find((part) => part !== undefined && isMechanic(part)) ?? "none",
  };
}

const mostRemembered = 1_000;

/** A file repeats few texts many times. */
export function remembered<Value>(read: (text: string) => Value): (text: string) => Value {
  const known = new Map<string, { value: Value }>();
  return (text) => {
    const before = known.get(text);
    if (before) return before.value;
    const value = read(text);
    if (known.size < mostRemembered) known.set(text, { value });
    return value;
  };
}
