import type { EntityManager } from "@mikro-orm/postgresql";
import type { CatalogueChange, HistoryKind } from "@shared/contract/catalogue-history";
import { audit } from "../../accounts";
import type { Author } from "./author";

export type What = CatalogueChange["what"];
export type Values = NonNullable<CatalogueChange["before"]>;

/** Whose history a change belongs to. */
export const kindOf: Record<What, HistoryKind> = {
  store: "store", product: "product", terms: "product", funding: "product", listing: "product", category: "category", event: "event", temperature: "temperature",
};

type Change = { by: Author; what: What; code: string; before: Values | null; after: Values | null };

/** Adds a change to the history, with the caller's flush; one that changes nothing leaves no trace. */
export function recordChange(em: EntityManager, { by, what, code, before, after }: Change): void {
  if (JSON.stringify(before) === JSON.stringify(after)) return;
  const change = before === null ? "added" : after === null ? "removed" : "changed";
  const { personId, tokenId, requestId, file } = by;
  audit(em, {
    personId, tokenId, requestId, action: `${what}.${change}`, subject: { kind: kindOf[what], id: code },
    detail: { before, after, ...(file && { file }) },
  });
}
