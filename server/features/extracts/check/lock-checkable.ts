import type { EntityManager } from "@mikro-orm/postgresql";
import { conflict, notFound } from "../../../errors";
import type { Extract } from "../extracts.entities";
import { lockExtract } from "../extracts.repository";

/** States from which a file can be checked, again or for the first time. */
const checkable = new Set(["received", "checking", "checked", "unusable"]);

/** The extract, its row locked. @throws ProblemError 404, or 409 where it is loaded or being loaded. */
export async function lockCheckable(em: EntityManager, extractId: string): Promise<Extract> {
  const extract = await lockExtract(em, extractId);
  if (!extract) throw notFound("extract");
  if (checkable.has(extract.state)) return extract;
  throw conflict("not-checkable", `This extract is ${extract.state}, so it cannot be checked again. Upload the file anew.`);
}
