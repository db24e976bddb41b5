import type { EventCode } from "../chain/events";
import type { ChainStore } from "../chain/stores";
import { storeLevel } from "../truth/store-level";
import { trueCurve, truthOf } from "../truth/true-curve";
import type { Offer } from "./offers";

/** The week as a store lives it, whatever is on offer. */
export type StoreSetting = { yearFraction: number; temperatureC: number; event: EventCode | "none" };

type StoreWeeks = { product: string; store: ChainStore; offers: Offer[]; settings: StoreSetting[] };

/** Log of the units a store would sell each week if nothing but its drivers moved them. */
export function logDemand({ product, store, offers, settings }: StoreWeeks): number[] {
  const of = { product, store: store.code };
  const price = trueCurve({ ...of, driver: "price" });
  const season = trueCurve({ ...of, driver: "yearFraction" });
  const temperature = trueCurve({ ...of, driver: "temperatureC" });
  const promotion = trueCurve({ ...of, driver: "promotion" });
  const event = trueCurve({ ...of, driver: "event" });
  const level = Math.log(truthOf(product).weeklyUnits) + storeLevel(of);
  return offers.map((offer, index) => {
    const setting = settings[index];
    return (
      level + price(offer.shelfPrice) + promotion(offer.promotion) +
      season(setting.yearFraction) + temperature(setting.temperatureC) + event(setting.event)
    );
  });
}
