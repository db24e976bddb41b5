import { stores } from "../chain/stores";
import { products } from "../chain/products";
import { createRandom } from "../random";

/** Standard deviation, on the log scale, of how much better a product does in one store than the store's size says. */
const levelSpread = 0.18;

/** Drawn once from a seed of their own: the truth stays the same whatever seed makes the sales. */
const levels = new Map(
  products.flatMap(({ code }) => {
    const random = createRandom(1, `store levels of ${code}`);
    return stores.map((store) => [`${code}/${store.code}`, Math.log(store.size) + levelSpread * random.normal()]);
  }),
);

/** Log of a product's level in a store against the chain's average store. */
export function storeLevel({ product, store }: { product: string; store: string }): number {
  const level = levels.get(`${product}/${store}`);
  if (level === undefined) throw new RangeError(`Larkmoor sells no product "${product}" in a store "${store}".`);
  return level;
}
