import { z } from "zod";
import { unusable } from "../../errors";
import type { ScenarioPlace } from "./scenarios.repository";

const cursorSchema = z.tuple([z.iso.datetime(), z.uuid()]);

/** A place in the list as an opaque text. */
export function cursorAt({ updatedAt, id }: ScenarioPlace): string {
  return Buffer.from(JSON.stringify([updatedAt.toISOString(), id])).toString("base64url");
}

/** @throws ProblemError 422 for a text that `cursorAt` did not make. */
export function placeAt(cursor: string): ScenarioPlace {
  const [updatedAt, id] = parse(cursor);
  return { updatedAt: new Date(updatedAt), id };
}

function parse(cursor: string): z.infer<typeof cursorSchema> {
  try {
    return cursorSchema.parse(JSON.parse(Buffer.from(cursor, "base64url").toString("utf8")));
  } catch {
    throw unusable("unknown-cursor", "This cursor is none we gave out. Begin again without one.");
  }
}
