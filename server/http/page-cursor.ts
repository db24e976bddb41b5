import type { z } from "zod";
import { unusable } from "../errors";

/** A cursor as text: opaque to whoever passes it back. */
export function writeCursor(position: Record<string, string | number>): string {
  return Buffer.from(JSON.stringify(position)).toString("base64url");
}

/** @throws ProblemError 422 for a text that is no cursor of ours. */
export function readCursor<Schema extends z.ZodType>(schema: Schema, cursor: string | undefined): z.output<Schema> | undefined {
  if (cursor === undefined) return undefined;
  const result = schema.safeParse(parsed(cursor));
  if (result.success) return result.data;
  throw unusable("invalid-cursor", "This cursor is none we gave out. Begin again without one.", [{ path: "cursor", message: "Not a cursor." }]);
}

function parsed(cursor: string): unknown {
  try {
    return JSON.parse(Buffer.from(cursor, "base64url").toString("utf8"));
  } catch {
    return undefined;
  }
}
