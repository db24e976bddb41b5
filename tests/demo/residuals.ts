import { yearFraction } from "@shared/calendar";
import type { EventCode } from "../../demo/chain/events";
import { stores } from "../../demo/chain/stores";
import { storeLevel } from "../../demo/truth/store-level";
import { trueCurve, truthOf } from "../../demo/truth/true-curve";
import type { Demo, PromotionLevel, SalesRow } from "../../demo/types";

function promotionOf({ feature, display }: SalesRow): PromotionLevel {
  if (feature) return display ? "both" : "feature";
  return display ? "display" : "none";
}

/** A week as a region has it: its temperature, and its event if any, read from the demo's own files. */
function weekReader({ temperatures, events }: Demo) {
  const temperature = new Map(temperatures.map((row) => [`${row.week}/${row.region}`, row.temperatureC]));
  return (week: string, region: string) => {
    const here = events.filter((event) => event.region === null || event.region === region);
    const event = here.find(({ firstDay }) => firstDay === week)?.event ?? "none";
    return { temperatureC: temperature.get(`${week}/${region}`) ?? Number.NaN, event: event as EventCode | "none" };
  };
}

/**
 * What the truth leaves over of a product's sales: units / expected units - 1, by store, one value a week.
 * Computed from the rows alone, as a reader of the files would.
 */
export function residualsByStore(demo: Demo, product: string): Map<string, number[]> {
  const readWeek = weekReader(demo);
  const rows = demo.sales.filter((row) => row.product === product);
  return new Map(
    stores.map(({ code: store, region }) => {
      const of = { product, store };
      const price = trueCurve({ ...of, driver: "price" });
      const season = trueCurve({ ...of, driver: "yearFraction" });
      const temperature = trueCurve({ ...of, driver: "temperatureC" });
      const promotion = trueCurve({ ...of, driver: "promotion" });
      const event = trueCurve({ ...of, driver: "event" });
      const level = Math.log(truthOf(product).weeklyUnits) + storeLevel(of);
      const residuals = rows.filter((row) => row.store === store).map((row) => {
        const week = readWeek(row.week, region);
        const expected =
          level + price(row.shelfPrice) + promotion(promotionOf(row)) + season(yearFraction(row.week)) +
          temperature(week.temperatureC) + event(week.event);
        return row.units / Math.exp(expected) - 1;
      });
      return [store, residuals];
    }),
  );
}
