import type { EntityManager } from "@mikro-orm/postgresql";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import { SavedLayoutEntity, type SavedLayout } from "../extracts.entities";

/** Saved layouts by name, of one kind of file or of all. */
export function findSavedLayouts(em: EntityManager, kind?: ExtractKind): Promise<SavedLayout[]> {
  return em.find(SavedLayoutEntity, kind ? { kind } : {}, { orderBy: { name: "asc" }, populate: ["updatedBy"] });
}

/** The layouts of a kind that a file may be recognised by, the one used last first. */
export function findLayoutsToRecognise(em: EntityManager, kind: ExtractKind): Promise<SavedLayout[]> {
  return em.find(SavedLayoutEntity, { kind }, { orderBy: { lastUsedAt: "desc nulls last", updatedAt: "desc", id: "asc" } });
}

export function findSavedLayout(em: EntityManager, id: string): Promise<SavedLayout | null> {
  return em.findOne(SavedLayoutEntity, { id }, { populate: ["updatedBy"] });
}

export function findSavedLayoutByName(em: EntityManager, name: string): Promise<SavedLayout | null> {
  return em.findOne(SavedLayoutEntity, { name }, { populate: ["updatedBy"] });
}

/** Keeps others from saving layouts until the transaction ends, so that a name is given once. */
export async function lockLayoutNames(em: EntityManager): Promise<void> {
  await em.execute("select pg_advisory_xact_lock(hashtextextended('shelftide layout names', 0))");
}
