import type * as contract from "@shared/contract/saved-layouts";
import type { SavedLayout } from "../extracts.entities";

/** A saved layout with its `updatedBy` loaded. */
export function presentSavedLayout({ id, name, kind, layout, updatedBy, updatedAt, lastUsedAt }: SavedLayout): contract.SavedLayout {
  return {
    id, name, kind, layout, updatedBy: { id: updatedBy.id, name: updatedBy.name },
    updatedAt: updatedAt.toISOString(), lastUsedAt: lastUsedAt?.toISOString() ?? null,
  };
}
