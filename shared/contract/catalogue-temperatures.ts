import { z } from "zod";
import { versionSchema } from "./catalogue-values";
import { weekSchema } from "./common";
import { defineEndpoint } from "./endpoint";

/** A week of a place: what was measured, and what is usual at that time of year by the other years. */
export const temperatureWeekSchema = z.object({
  week: weekSchema,
  /** Weekly mean in degrees Celsius; null where none is known. */
  temperatureC: z.number().nullable(),
  /** Of a store's weeks: whether it is the store's own or its region's. */
  source: z.enum(["store", "region"]).nullable(),
  /** Of the place's own row; null where it has none. */
  version: versionSchema.nullable(),
  /** Mean of the other years at this time of year, smoothed; null where no other year covers it. */
  normalC: z.number().nullable(),
  /** Lowest and highest of the other years at this time of year, a week to either side. */
  lowC: z.number().nullable(),
  highC: z.number().nullable(),
});
export type TemperatureWeek = z.infer<typeof temperatureWeekSchema>;

const place = z.object({ scope: z.enum(["region", "store"]), place: z.string().trim().min(1).max(80) });
const params = place.extend({ week: weekSchema });

export const listTemperatures = defineEndpoint({
  method: "GET", path: "/api/temperatures/:scope/:place", summary: "Weekly mean temperatures of a region or store over some weeks, with what is usual",
  permission: "read", params: place, query: z.object({ first: weekSchema, last: weekSchema }),
  response: z.object({ items: z.array(temperatureWeekSchema), firstKnown: weekSchema.nullable(), lastKnown: weekSchema.nullable() }),
});
export const putTemperature = defineEndpoint({
  method: "PUT", path: "/api/temperatures/:scope/:place/:week", summary: "Enter or change a week's mean temperature", permission: "catalogue:write", params,
  body: z.object({ temperatureC: z.number("Give a number.").min(-60, "No week has a mean below -60 °C.").max(60, "No week has a mean above 60 °C.") }),
  response: temperatureWeekSchema,
});
export const deleteTemperature = defineEndpoint({
  method: "DELETE", path: "/api/temperatures/:scope/:place/:week", summary: "Remove a week's mean temperature", permission: "catalogue:write", params,
});
export const exportTemperatures = defineEndpoint({
  method: "GET", path: "/api/temperatures.csv", summary: "All weekly mean temperatures as a file that can be uploaded again", permission: "read", produces: "text/csv",
});
