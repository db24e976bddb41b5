import type { ChainStore } from "../chain/stores";
import type { Random } from "../random";

/** Some weeks in which some stores sell a product at a regular price of their own: a ratio to the chain's. */
export type PriceTrial = { firstWeek: number; lastWeek: number; ratios: ReadonlyMap<string, number> };

const trialsInAll = 5;

/**
 * Plans one product's price trials, spread over the weeks. They move prices without a promotion, and between stores
 * in the same week: without them, price could not be told from promotion and season.
 */
export function planPriceTrials(
  { weekCount, stores, random }: { weekCount: number; stores: readonly ChainStore[]; random: Random },
): PriceTrial[] {
  const span = Math.floor(weekCount / trialsInAll);
  return Array.from({ length: trialsInAll }, (_, index) => {
    const length = random.between(4, 6);
    const firstWeek = index * span + random.between(0, span - length);
    const step = random.choose([[0.04, 1], [0.06, 2], [0.08, 2], [0.1, 1]]);
    const arms = [[1 - step, 1], [1, 1], [1 + step, 1]] as const;
    const ratios = new Map(stores.map(({ code }) => [code, random.choose(arms)]));
    return { firstWeek, lastWeek: firstWeek + length - 1, ratios };
  });
}
