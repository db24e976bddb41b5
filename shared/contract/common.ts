import { z } from "zod";

/** A calendar day as YYYY-MM-DD. */
export const daySchema = z.iso.date("Give a date as YYYY-MM-DD.");
/** A week is named by its first day. */
export const weekSchema = daySchema;

export const idSchema = z.uuid("This is not an identifier we gave out.");
export const idParams = z.object({ id: idSchema });

/** Code that the chain gives to a store or product. */
export const codeSchema = z.string().trim().min(1, "A code is needed.").max(64, "A code has at most 64 characters.");

export const timestampSchema = z.iso.datetime();

/** Problem details (RFC 9457) with our code and the id to quote. */
export const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  code: z.string(),
  requestId: z.string(),
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
});
export type Problem = z.infer<typeof problemSchema>;

/** Lists page by cursor: pass `nextCursor` back as `cursor`; null on the last page. */
export const pageQuery = z.object({
  cursor: z.string().max(400).optional(),
  limit: z.coerce.number().int().min(1).max(1000).default(100),
});
export const pageOf = <Item extends z.ZodType>(item: Item) =>
  z.object({ items: z.array(item), nextCursor: z.string().nullable() });

/** Confidence level of an interval on the screen. */
export const levelSchema = z.coerce.number().min(0.5).max(0.999).default(0.8);

export const personReferenceSchema = z.object({ id: idSchema, name: z.string() });
