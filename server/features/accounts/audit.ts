import type { EntityManager } from "@mikro-orm/postgresql";
import { AuditEntryEntity } from "./accounts.entities";

export type AuditedAct = {
  /** Who did it; null for the product itself. */
  personId: string | null;
  /** The access token it was done by, if any. */
  tokenId?: string | null;
  /** What was done, as thing.verb, for example "extract.loaded". */
  action: string;
  subject: { kind: string; id?: string | null };
  /** What one must know to understand it later; never a password or token. */
  detail?: Record<string, unknown>;
  requestId?: string | null;
};

/** Adds an entry to the audit trail; it is written with the caller's flush, so in the same transaction as the act. */
export function audit(em: EntityManager, { personId, tokenId, action, subject, detail, requestId }: AuditedAct): void {
  const entry = em.create(AuditEntryEntity, {
    person: personId,
    tokenId: tokenId ?? null,
    action,
    subjectKind: subject.kind,
    subjectId: subject.id ?? null,
    detail: detail ?? null,
    requestId: requestId ?? null,
  });
  em.persist(entry);
}
