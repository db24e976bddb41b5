import type { Steps } from "@/components/charts/scale/snap";

type PriceAxisOptions = {
  /** What the stores saw; null where no model learnt a price curve. */
  seen: readonly [number, number] | null;
  /** Prices that must have their place on the axis: regular and planned ones. */
  prices: readonly number[];
  /** Decimals of the chain's currency. */
  digits: number;
};

/** Planning holds prices to what was seen plus a tenth on the log scale; the axis shows that much and no more. */
const beyondSeen = Math.exp(0.1);

/** The price lane's axis in whole smallest coins: what was seen, a tenth beyond it, and every price of the plan. */
export function priceAxis({ seen, prices, digits }: PriceAxisOptions): Steps {
  const coin = 10 ** -digits;
  const low = Math.min(...prices, ...(seen ? [seen[0] / beyondSeen] : []));
  const high = Math.max(...prices, ...(seen ? [seen[1] * beyondSeen] : []));
  const floor = Math.max(coin, Math.floor(low / coin) * coin);
  const ceiling = Math.max(floor + 10 * coin, Math.ceil(high / coin) * coin);
  return { min: Number(floor.toFixed(digits)), max: Number(ceiling.toFixed(digits)), step: coin };
}
