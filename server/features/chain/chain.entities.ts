import { defineEntity, p, type InferEntity } from "@mikro-orm/core";

/** One row: one installation serves one chain. */
export const ChainEntity = defineEntity({
  name: "Chain",
  tableName: "chain",
  properties: {
    id: p.integer().primary().autoincrement(false),
    name: p.string().length(120),
    currency: p.string().length(3),
    locale: p.string().length(35),
    timeZone: p.string().length(64),
    calendar: p.string().length(10).$type<"iso" | "4-5-4">(),
    weekStart: p.smallint(),
    temperatureUnit: p.string().length(12).$type<"celsius" | "fahrenheit">(),
    intervalLevel: p.double().$type<number>().default(0.8),
    uploadLimitBytes: p.bigint("number"),
    secondLookShare: p.double().$type<number>().default(0.25),
    salesDueDay: p.smallint().default(1),
    salesDueHour: p.smallint().default(12),
  },
});
export type ChainRow = InferEntity<typeof ChainEntity>;
