import type { ChainProduct } from "../chain/products";
import type { ChainStore } from "../chain/stores";
import type { Random } from "../random";
import type { PromotionLevel } from "../types";
import { regularPriceAt, trialPrice, cutPrice } from "./prices";
import { planPriceTrials, type PriceTrial } from "./price-trials";
import { planPromotions, type Promotion } from "./promotions";

/** What a store asks for a product in a week, and how it supports it. */
export type Offer = { weekIndex: number; regularPrice: number; shelfPrice: number; promotion: PromotionLevel };

/** Share of display promotions that a store does not put up. */
const displayMissedShare = 0.08;

type Assortment = { product: ChainProduct; stores: readonly ChainStore[]; weekCount: number; random: Random };

/** All offers of one product: for each store, one a week. */
export function makeOffers({ product, stores, weekCount, random }: Assortment): Map<string, Offer[]> {
  const promotions = planPromotions({ weekCount, random });
  const trials = planPriceTrials({ weekCount, stores, random });
  return new Map(
    stores.map((store) => {
      const executed = promotions.flatMap((promotion) => executedIn({ promotion, store, random }) ?? []);
      const offers = Array.from({ length: weekCount }, (_, weekIndex) => {
        const promotion = executed.find(runningIn(weekIndex)) ?? null;
        const trial = trials.find(runningIn(weekIndex)) ?? null;
        return offerOf({ product, store, weekIndex, trial, promotion });
      });
      return [store.code, offers];
    }),
  );
}

const runningIn = (week: number) => ({ firstWeek, lastWeek }: { firstWeek: number; lastWeek: number }) =>
  firstWeek <= week && week <= lastWeek;

function executedIn(
  { promotion, store, random }: { promotion: Promotion; store: ChainStore; random: Random },
): Promotion | null {
  const missed = random.uniform() < displayMissedShare && !promotion.isKey;
  if (!promotion.regions.includes(store.region)) return null;
  if (!missed || promotion.support === "none" || promotion.support === "feature") return promotion;
  return { ...promotion, support: promotion.support === "both" ? "feature" : "none" };
}

type Occasion = {
  product: ChainProduct;
  store: ChainStore;
  weekIndex: number;
  trial: PriceTrial | null;
  promotion: Promotion | null;
};

function offerOf({ product, store, weekIndex, trial, promotion }: Occasion): Offer {
  const chainPrice = regularPriceAt(product, weekIndex);
  const regularPrice = trialPrice(chainPrice, trial?.ratios.get(store.code) ?? 1);
  const advertised = promotion === null ? regularPrice : cutPrice(chainPrice, promotion.depth);
  return {
    weekIndex,
    regularPrice,
    shelfPrice: Math.min(regularPrice, advertised),
    promotion: promotion?.support ?? "none",
  };
}
