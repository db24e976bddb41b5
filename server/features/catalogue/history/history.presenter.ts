import type { CatalogueChange } from "@shared/contract/catalogue-history";
import type { StoredChange } from "./history.repository";

export function presentChange({ id, at, personId, personName, byToken, action, code, detail }: StoredChange): CatalogueChange {
  const [what, change] = action.split(".") as [CatalogueChange["what"], CatalogueChange["change"]];
  const person = personId === null || personName === null ? null : { id: personId, name: personName };
  return {
    id, at: new Date(at).toISOString(), person, byToken, file: detail.file ?? null, what, change, code,
    before: detail.before, after: detail.after,
  };
}
