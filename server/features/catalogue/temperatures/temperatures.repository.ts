import type { EntityManager } from "@mikro-orm/postgresql";
import { TemperatureEntity, type Temperature } from "../catalogue.entities";

/** A region's temperatures, or those of a store, by week. */
export type Place = { region: string; storeCode: string };

export function findTemperaturesOf(em: EntityManager, { region, storeCode }: Place): Promise<Temperature[]> {
  return em.find(TemperatureEntity, { region, storeCode }, { orderBy: { week: "asc" } });
}

export function findTemperature(em: EntityManager, { region, storeCode, week }: Place & { week: string }): Promise<Temperature | null> {
  return em.findOne(TemperatureEntity, { region, storeCode, week });
}
