import type { EntityManager } from "@mikro-orm/postgresql";
import type { Pool } from "pg";
import { AccessTokenEntity, PersonEntity, type AccessToken, type Person } from "./accounts.entities";

/** How long a token's time of last use may lag behind, so that not every call writes. */
const lastUseEverySeconds = 60;

/** The person with this address, password hash included; addresses are kept in lower case. */
export function personByEmail(em: EntityManager, email: string): Promise<Person | null> {
  return em.findOne(PersonEntity, { email: email.toLowerCase() }, { populate: ["passwordHash"] });
}

export function personById(em: EntityManager, id: string): Promise<Person | null> {
  return em.findOne(PersonEntity, { id });
}

/** The same with the password hash, which is otherwise left in the database. */
export function personWithPassword(em: EntityManager, id: string): Promise<Person> {
  return em.findOneOrFail(PersonEntity, { id }, { populate: ["passwordHash"] });
}

/** A token that still counts, with its person; none where it expired, was revoked, or its person was disabled. */
export function usableToken(em: EntityManager, hash: string, now: Date): Promise<AccessToken | null> {
  const usable = { hash, revokedAt: null, expiresAt: { $gt: now }, person: { disabledAt: null } };
  return em.findOne(AccessTokenEntity, usable, { populate: ["person"] });
}

export function tokensOf(em: EntityManager, personId: string): Promise<AccessToken[]> {
  return em.find(AccessTokenEntity, { person: personId }, { orderBy: { createdAt: "desc", id: "asc" } });
}

export function tokenById(em: EntityManager, id: string): Promise<AccessToken | null> {
  return em.findOne(AccessTokenEntity, { id });
}

/** Notes that a token was used, at most once a minute. */
export async function noteTokenUse(em: EntityManager, token: AccessToken, now: Date): Promise<void> {
  const last = token.lastUsedAt?.getTime() ?? 0;
  if (now.getTime() - last < lastUseEverySeconds * 1000) return;
  await em.nativeUpdate(AccessTokenEntity, { id: token.id }, { lastUsedAt: now });
}

/** Moves a session's idle limit; it brings no ended session back. */
export async function noteLastSeen(pool: Pool, sessionId: string, nowMs: number): Promise<void> {
  await pool.query(
    "update user_session set sess = jsonb_set(sess::jsonb, '{lastSeenAt}', to_jsonb($2::bigint))::json where sid = $1",
    [sessionId, nowMs],
  );
}
