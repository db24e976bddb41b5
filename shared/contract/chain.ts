import { z } from "zod";
import { defineEndpoint } from "./endpoint";

/** What holds for the whole chain. */
export const chainSchema = z.object({
  name: z.string().trim().min(1, "Give the chain a name.").max(120, "A name has at most 120 characters."),
  /** ISO 4217 code. */
  currency: z.string().regex(/^[A-Z]{3}$/, "Give the currency as three capital letters, for example EUR."),
  /** BCP 47 tag that numbers and dates are written by. */
  locale: z.string().min(2).max(35),
  timeZone: z.string().min(1).max(64),
  calendar: z.enum(["iso", "4-5-4"]),
  /** First day of the chain's week: 0 Sunday to 6 Saturday. */
  weekStart: z.number().int().min(0).max(6),
  temperatureUnit: z.enum(["celsius", "fahrenheit"]),
  /** Level of intervals on screens unless asked otherwise. */
  intervalLevel: z.number().min(0.5, "Give a level from 50 %.").max(0.999, "Give a level up to 99.9 %."),
  /** Largest upload that is accepted, in bytes. */
  uploadLimitBytes: z.number().int().positive(),
  /** A load that changes a week's units, or leaves out rows it had, by more than this share must be confirmed in so many words. */
  secondLookShare: z.number().min(0, "Give a share from 0 %.").max(1, "Give a share up to 100 %."),
  /** By when last week's sales are expected, where the chain is: day of the week, 0 Sunday to 6 Saturday, and full hour. */
  salesDueDay: z.number().int().min(0).max(6),
  salesDueHour: z.number().int().min(0).max(23),
});
export type Chain = z.infer<typeof chainSchema>;

export const getChain = defineEndpoint({
  method: "GET", path: "/api/chain", summary: "The chain's settings", permission: "read", response: chainSchema,
});

export const putChain = defineEndpoint({
  method: "PUT", path: "/api/chain", summary: "Change the chain's settings", permission: "settings:manage",
  body: chainSchema.partial(), response: chainSchema,
});

export const getHealth = defineEndpoint({
  method: "GET", path: "/api/health", summary: "Whether the service answers and reaches its database", permission: "public",
  response: z.object({ status: z.literal("ok") }),
});

export const getDescription = defineEndpoint({
  method: "GET", path: "/api/openapi.json", summary: "This description", permission: "public",
  response: z.record(z.string(), z.unknown()),
});
