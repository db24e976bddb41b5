import { randomUUID } from "node:crypto";
import type { EntityManager } from "@mikro-orm/postgresql";
import type { Permission } from "@shared/contract/permissions";
import { notFound } from "../../errors";
import type { Caller } from "../../http/route";
import { AccessTokenEntity, type AccessToken } from "./accounts.entities";
import { tokenById, tokensOf } from "./accounts.repository";
import { audit } from "./audit";
import { newToken } from "./tokens";
import { mayRevoke, requireOwnRights, requireSession } from "./tokens.policy";

const dayMs = 86_400_000;

type NewToken = { name: string; permissions: Permission[]; expiresInDays: number };
type By = { caller: Caller; requestId: string; now: Date };

/**
 * Makes an access token for the caller. The token itself is answered once and kept nowhere.
 *
 * @throws ProblemError 403 where it would do more than its maker may, or a token asks for one.
 */
export async function makeToken(
  em: EntityManager,
  wanted: NewToken,
  { caller, requestId, now }: By,
): Promise<{ row: AccessToken; token: string }> {
  requireSession(caller);
  requireOwnRights(caller, wanted.permissions);
  const { token, prefix, hash } = newToken();
  const row = em.create(AccessTokenEntity, {
    // Given here, since the audit entry names it before the flush would.
    id: randomUUID(),
    person: caller.personId,
    name: wanted.name,
    prefix,
    hash,
    permissions: [...new Set(wanted.permissions)],
    createdAt: now,
    expiresAt: new Date(now.getTime() + wanted.expiresInDays * dayMs),
  });
  em.persist(row);
  audit(em, {
    personId: caller.personId,
    action: "token.made",
    subject: { kind: "token", id: row.id },
    detail: { name: row.name, permissions: row.permissions, expiresAt: row.expiresAt.toISOString() },
    requestId,
  });
  await em.flush();
  return { row, token };
}

/**
 * Revokes a token for good; a second time changes nothing.
 *
 * @throws ProblemError 404 for a token that is not the caller's, unless the caller manages people.
 */
export async function revokeToken(em: EntityManager, id: string, { caller, requestId, now }: By): Promise<void> {
  const row = await tokenById(em, id);
  if (!row || !mayRevoke(caller, row)) throw notFound("token");
  if (row.revokedAt) return;
  row.revokedAt = now;
  audit(em, {
    personId: caller.personId,
    tokenId: caller.tokenId,
    action: "token.revoked",
    subject: { kind: "token", id: row.id },
    detail: { name: row.name },
    requestId,
  });
  await em.flush();
}

/** A person's own tokens, newest first, those that no longer count included. */
export function ownTokens(em: EntityManager, personId: string): Promise<AccessToken[]> {
  return tokensOf(em, personId);
}
