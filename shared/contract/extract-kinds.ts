import { z } from "zod";

/** What a file holds. Only sales are withdrawn; the others are the catalogue's, and are corrected by a later file or a form. */
export const extractKindSchema = z.enum(["sales", "stores", "products", "listings", "funding", "events", "temperatures"]);
export type ExtractKind = z.infer<typeof extractKindSchema>;
