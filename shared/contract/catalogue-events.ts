import { z } from "zod";
import { inOrder, regionSchema, textSchema, versionSchema } from "./catalogue-values";
import { codeSchema, daySchema } from "./common";
import { defineEndpoint } from "./endpoint";

/** One occurrence of an event; one that moves from year to year has a row a year under the same code. */
export const eventSchema = z.object({
  id: z.number().int(), code: z.string(), name: z.string(), firstDay: daySchema, lastDay: daySchema,
  /** Null for the whole chain. */
  region: z.string().nullable(),
  version: versionSchema,
});
export type CatalogueEvent = z.infer<typeof eventSchema>;

export const changedEventSchema = z.object({
  code: codeSchema, name: textSchema(120), firstDay: daySchema, lastDay: daySchema, region: regionSchema.nullable().default(null),
}).refine(inOrder.check, inOrder.told);

const params = z.object({ id: z.coerce.number().int().positive().max(2_147_483_647) });

export const listEvents = defineEndpoint({
  method: "GET", path: "/api/events", summary: "Occurrences of the chain's events, by first day", permission: "read",
  query: z.object({ code: codeSchema.optional(), from: daySchema.optional(), to: daySchema.optional() }),
  response: z.object({ items: z.array(eventSchema) }),
});
export const createEvent = defineEndpoint({
  method: "POST", path: "/api/events", summary: "Enter an occurrence of an event", permission: "catalogue:write",
  body: changedEventSchema, response: eventSchema, status: 201,
});
export const putEvent = defineEndpoint({
  method: "PUT", path: "/api/events/:id", summary: "Change an occurrence of an event", permission: "catalogue:write",
  params, body: changedEventSchema, response: eventSchema,
});
export const deleteEvent = defineEndpoint({
  method: "DELETE", path: "/api/events/:id", summary: "Remove an occurrence of an event", permission: "catalogue:write", params,
});
export const exportEvents = defineEndpoint({
  method: "GET", path: "/api/events.csv", summary: "All occurrences of events as a file that can be uploaded again", permission: "read", produces: "text/csv",
});
