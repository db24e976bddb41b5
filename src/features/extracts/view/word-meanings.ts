import { promotionColumn } from "@shared/contract/layouts";
import type { Layout, WordLists } from "@shared/contract/layouts";
import type { LayoutPreview } from "@shared/contract/saved-layouts";

export type Meaning = keyof WordLists;
export type MeaningLabel = { meaning: Meaning; label: string };

/** What a word for a promotion can mean. */
export const promotionMeanings: readonly MeaningLabel[] = [
  { meaning: "none", label: "No promotion" },
  { meaning: "feature", label: "Feature: in the leaflet or an advert" },
  { meaning: "display", label: "Display: placed a second time" },
  { meaning: "feature_and_display", label: "Feature and display" },
  { meaning: "price_cut", label: "Price cut" },
  { meaning: "multi_buy", label: "Multi-buy" },
  { meaning: "coupon", label: "Coupon" },
  { meaning: "other", label: "Other promotion" },
];
export const yesOrNo: readonly MeaningLabel[] = [
  { meaning: "yes", label: "Yes" },
  { meaning: "no", label: "No" },
];

/** Columns of ours whose values are words in many files, and what a word can mean there. */
const meaningsOf: Record<string, readonly MeaningLabel[]> = {
  [promotionColumn]: promotionMeanings,
  mechanic: promotionMeanings.filter(({ meaning }) => ["none", "price_cut", "multi_buy", "coupon", "other"].includes(meaning)),
  feature: yesOrNo,
  display: yesOrNo,
  sold_by_weight: yesOrNo,
};

/** A word for the whole promotion is told of at the first of these that it would fill. */
const partsOfPromotion = ["feature", "display", "mechanic"];

export type UnknownWord = { word: string; column: string; meanings: readonly MeaningLabel[] };

/** What is longer is no word, but a row that was not cut into columns. */
const longestWord = 40;

/** Words of the first rows that stand in no list, each once. */
export const unknownWords = ({ rows }: Pick<LayoutPreview, "rows">, { mapping }: Pick<Layout, "mapping">): UnknownWord[] => {
  const found = new Map<string, UnknownWord>();
  for (const { column, value } of rows.flatMap(({ problems }) => problems)) {
    const source = column in mapping || !partsOfPromotion.includes(column) ? column : promotionColumn;
    const meanings = meaningsOf[source];
    if (meanings && value.length <= longestWord && !found.has(`${source} ${value}`)) found.set(`${source} ${value}`, { word: value, column: source, meanings });
  }
  return [...found.values()];
};

/** Gives a word its meaning, and takes it out of the lists that say otherwise. */
export const learnWord = (words: WordLists, word: string, { meaning, among }: { meaning: Meaning; among: readonly MeaningLabel[] }): WordLists => {
  const isWord = (other: string) => other.trim().toLowerCase() === word.trim().toLowerCase();
  const cleared = Object.fromEntries(among.map((one) => [one.meaning, words[one.meaning].filter((other) => !isWord(other))]));
  const made = { ...words, ...cleared };
  return { ...made, [meaning]: [...made[meaning], word] };
};
