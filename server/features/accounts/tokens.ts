import { createHash, randomBytes } from "node:crypto";
import { permissionsOf } from "@shared/contract/permissions";
import type { Caller } from "../../http/route";
import type { Services } from "../../services";
import { noteTokenUse, usableToken } from "./accounts.repository";

/** Begins every token, so that people and secret scanners recognise one. */
const mark = "shelf_";
/** Characters of a token that are kept readable, to tell one's tokens apart. */
const shownLength = 12;

/** A new token (256 random bits), its readable beginning, and the hash that is kept in its place. */
export function newToken(): { token: string; prefix: string; hash: string } {
  const token = mark + randomBytes(32).toString("base64url");
  return { token, prefix: token.slice(0, shownLength), hash: hashOf(token) };
}

/** SHA-256 as hexadecimal: a token is random and long, so a slow hash would add nothing. */
function hashOf(token: string): string {
  return createHash("sha256").update(token).digest("hex");
}

/**
 * Who calls by `Authorization: Bearer …`; undefined where the token does not count. A token never does more than its
 * person may do today, so rights that were taken away are gone from it too.
 */
export async function callerByToken(authorization: string, services: Services): Promise<Caller | undefined> {
  const token = /^Bearer +(\S+)$/i.exec(authorization)?.[1];
  if (!token?.startsWith(mark)) return undefined;
  const em = services.orm.em.fork();
  const now = services.now();
  const row = await usableToken(em, hashOf(token), now);
  if (!row) return undefined;
  await noteTokenUse(em, row, now);
  const person = row.person;
  const current = new Set(permissionsOf(person.roles));
  return {
    personId: person.id,
    name: person.name,
    permissions: new Set(row.permissions.filter((permission) => current.has(permission))),
    categories: person.categories,
    tokenId: row.id,
    mustChangePassword: person.mustChangePassword,
  };
}
