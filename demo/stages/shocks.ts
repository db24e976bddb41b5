import type { ChainProduct } from "../chain/products";
import { createRandom } from "../random";
import { trueNoise } from "../truth/noise";
import { autoregression } from "./autoregression";

/** What a product's weeks share across all stores: a shock of the category and one of its own. */
export function weekShocks(
  { seed, product, weekCount }: { seed: number; product: ChainProduct; weekCount: number },
): number[] {
  const category = createRandom(seed, `week shocks of ${product.category}`);
  const own = createRandom(seed, `week shocks of ${product.code}`);
  return Array.from(
    { length: weekCount },
    () => trueNoise.categoryWeekSpread * category.normal() + trueNoise.productWeekSpread * own.normal(),
  );
}

/** What persists of a product in one store from week to week. */
export function storeShocks(
  { seed, product, store, weekCount }: { seed: number; product: ChainProduct; store: string; weekCount: number },
): number[] {
  return autoregression({
    count: weekCount,
    spread: trueNoise.persistentSpread,
    persistence: trueNoise.persistence,
    random: createRandom(seed, `shocks of ${product.code} in ${store}`),
  });
}
