import type { Random } from "../random";
import type { PromotionLevel, Region } from "../types";

/** A promotion of one product: some weeks in some regions, with or without a price cut, with or without support. */
export type Promotion = {
  firstWeek: number;
  lastWeek: number;
  regions: readonly Region[];
  /** The first of its kind: it runs everywhere and no store misses it, so that every store has seen every kind. */
  isKey: boolean;
  /** Price cut as a share of the regular price; 0 where only feature or display supports it. */
  depth: number;
  support: PromotionLevel;
};

const everywhere: readonly Region[] = ["Coast", "Town", "Moor"];

const lengths = [[1, 3], [2, 5], [3, 2]] as const;
/** Dealt like cards, shuffled anew when used up, so that every kind of support comes round for every product. */
const supportDeck = ["none", "none", "feature", "feature", "display", "display", "both", "both"] as const;
const depths = [[0.08, 2], [0.12, 3], [0.16, 3], [0.2, 4], [0.25, 3], [0.3, 2]] as const;
const scopes = [
  [everywhere, 65], [["Coast", "Town"], 12], [["Town", "Moor"], 12], [["Coast", "Moor"], 11],
] as const satisfies readonly (readonly [readonly Region[], number])[];
const supportOnlyShare = 0.16;

/** Plans one product's promotions. Depth does not depend on support, so what each does can be learnt apart. */
export function planPromotions({ weekCount, random }: { weekCount: number; random: Random }): Promotion[] {
  const promotions: Promotion[] = [];
  const deck: PromotionLevel[] = [];
  let week = random.between(1, 7);
  while (week < weekCount) {
    const lastWeek = Math.min(week + random.choose(lengths) - 1, weekCount - 1);
    if (deck.length === 0) deck.push(...supportDeck);
    const [support] = deck.splice(random.between(0, deck.length - 1), 1);
    const drawnDepth = random.choose(depths);
    const supportOnly = random.uniform() < supportOnlyShare;
    const depth = supportOnly && support !== "none" ? 0 : drawnDepth;
    const scope = random.choose<readonly Region[]>(scopes);
    const isKey = !promotions.some((earlier) => earlier.support === support);
    promotions.push({ firstWeek: week, lastWeek, regions: isKey ? everywhere : scope, isKey, depth, support });
    week = lastWeek + random.between(4, 9);
  }
  return promotions;
}
