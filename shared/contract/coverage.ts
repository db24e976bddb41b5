import { z } from "zod";
import { codeSchema, idSchema, weekSchema } from "./common";
import { defineEndpoint } from "./endpoint";

/**
 * What is known of a store in a week: "there", "thin" (less than half of the rows usual for it), "restated" (a later file changed
 * rows of an earlier one), "withdrawn" (what was loaded was taken back), "missing" (open, nothing loaded), "closed" (not yet
 * opened, or closed for good).
 */
export const coverageStateSchema = z.enum(["there", "thin", "restated", "withdrawn", "missing", "closed"]);
export type CoverageState = z.infer<typeof coverageStateSchema>;

/**
 * Store by week. Of a store, `states`, `rows` and `files` are in the order of `weeks`: how it stands, how many rows are loaded,
 * and the place in `extracts` of the file loaded last there (or withdrawn); null where there is none. Three lists and not a list
 * of cells, since 500 stores in 160 weeks are 80,000 cells.
 */
export const coverageSchema = z.object({
  weeks: z.array(weekSchema),
  extracts: z.array(z.object({ id: idSchema, fileName: z.string() })),
  stores: z.array(z.object({
    code: codeSchema, name: z.string(), region: z.string(),
    states: z.array(coverageStateSchema), rows: z.array(z.number().int()), files: z.array(z.number().int().nullable()),
  })),
  /** Whether a file just loaded or withdrawn is not counted in yet. */
  isBehind: z.boolean(),
});
export type Coverage = z.infer<typeof coverageSchema>;

export const getCoverage = defineEndpoint({
  method: "GET", path: "/api/coverage", summary: "Which weeks of which stores are loaded, missing, restated or withdrawn", permission: "read",
  /** The last week shown, by default the last that has ended, and how many weeks up to it. */
  query: z.object({ until: weekSchema.optional(), weeks: z.coerce.number().int().min(1).max(160).default(52) }),
  response: coverageSchema,
});
