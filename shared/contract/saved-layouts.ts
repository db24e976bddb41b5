import { z } from "zod";
import { idParams, idSchema, personReferenceSchema, timestampSchema } from "./common";
import { defineEndpoint } from "./endpoint";
import { extractKindSchema } from "./extract-kinds";
import { acceptedSchema } from "./jobs";
import { layoutSchema } from "./layouts";

const layoutNameSchema = z.string().trim().min(1, "Give the layout a name.").max(80, "A layout's name has at most 80 characters.");

/** A layout kept for the files of one source; a file that has its columns is recognised by it. */
export const savedLayoutSchema = z.object({
  id: idSchema,
  /** Among all layouts there is one of this name; an upload can ask for it. */
  name: layoutNameSchema,
  kind: extractKindSchema,
  layout: layoutSchema,
  updatedBy: personReferenceSchema,
  updatedAt: timestampSchema,
  /** When a file was last read by it. */
  lastUsedAt: timestampSchema.nullable(),
});
export type SavedLayout = z.infer<typeof savedLayoutSchema>;

/** One of the file's columns with values from its first rows, and what it is taken for. */
export const fileColumnSchema = z.object({
  name: z.string(), position: z.number().int(), samples: z.array(z.string()),
  proposed: z.string().nullable(), why: z.string(),
  /** How sure the proposal is: 1 certain, 0.5 a guess; absent where nothing is proposed. */
  confidence: z.number().min(0).max(1).optional(),
});

/**
 * The first rows as they stand in the file and as a layout reads them: `fields` are in the order of `fileColumns`, `values` in
 * that of `columns`. The file's columns follow from the layout's encoding, separator and header, whatever its mapping says.
 */
export const layoutPreviewSchema = z.object({
  fileColumns: z.array(fileColumnSchema),
  columns: z.array(z.string()),
  rows: z.array(z.object({
    line: z.number().int(),
    fields: z.array(z.string()),
    values: z.array(z.string()),
    problems: z.array(z.object({ column: z.string(), value: z.string(), reason: z.string() })),
  })),
  /** What to look at before trusting it; `position` is the file's column it speaks of. */
  warnings: z.array(z.object({ code: z.string(), message: z.string(), position: z.number().int().optional() })),
  /** Needed columns of ours that nothing is mapped to: without them the file cannot be used. */
  missing: z.array(z.string()),
});
export type LayoutPreview = z.infer<typeof layoutPreviewSchema>;

/** How an extract is read, or would be: the layout in force, or the one proposed where there is none yet. */
export const extractLayoutSchema = z.object({
  layout: layoutSchema,
  origin: z.enum(["own", "saved", "chosen", "proposed"]),
  saved: z.object({ id: idSchema, name: z.string() }).nullable(),
  isConfirmed: z.boolean(),
  preview: layoutPreviewSchema,
});
export type ExtractLayout = z.infer<typeof extractLayoutSchema>;

export const listLayouts = defineEndpoint({
  method: "GET", path: "/api/layouts", summary: "Saved layouts by name", permission: "read",
  query: z.object({ kind: extractKindSchema.optional() }), response: z.object({ items: z.array(savedLayoutSchema) }),
});
export const createLayout = defineEndpoint({
  method: "POST", path: "/api/layouts", summary: "Save a layout", permission: "extracts:write",
  body: z.object({ name: layoutNameSchema, layout: layoutSchema }), response: savedLayoutSchema, status: 201,
});
export const putLayout = defineEndpoint({
  method: "PUT", path: "/api/layouts/:id", summary: "Change a saved layout; files read already stay as they are", permission: "extracts:write",
  params: idParams, body: z.object({ name: layoutNameSchema, layout: layoutSchema }), response: savedLayoutSchema,
});
export const deleteLayout = defineEndpoint({
  method: "DELETE", path: "/api/layouts/:id", summary: "Forget a saved layout", permission: "extracts:write", params: idParams,
});
export const getExtractLayout = defineEndpoint({
  method: "GET", path: "/api/extracts/:id/layout", summary: "How the file is read, with its first rows", permission: "read",
  params: idParams, response: extractLayoutSchema,
});
export const previewLayout = defineEndpoint({
  method: "POST", path: "/api/extracts/:id/layout/preview", summary: "The file's first rows as another layout would read them; nothing is kept",
  permission: "extracts:write", params: idParams, body: z.object({ layout: layoutSchema }), response: layoutPreviewSchema,
});
export const putExtractLayout = defineEndpoint({
  method: "PUT", path: "/api/extracts/:id/layout", summary: "Read the file by this layout from now on, and check it again without a new upload",
  permission: "extracts:write", params: idParams,
  /** `saveAs` keeps it for the source, new or in place of the layout of that name. */
  body: z.object({ layout: layoutSchema, saveAs: layoutNameSchema.optional() }), response: acceptedSchema, status: 202,
});
