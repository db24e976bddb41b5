import type { Permission } from "@shared/contract/permissions";
import { ProblemError } from "../../errors";
import type { Caller } from "../../http/route";
import type { AccessToken } from "./accounts.entities";

/**
 * Only a person at a keyboard, not a token: a token that leaked must not outlive itself in tokens it made.
 *
 * @throws ProblemError 403 where an access token calls.
 */
export function requireSession(caller: Caller): void {
  if (caller.tokenId === null) return;
  throw new ProblemError({
    status: 403,
    code: "session-needed",
    detail: "An access token cannot do this. Sign in with your password.",
  });
}

/** A token may do at most what its maker may. @throws ProblemError 403 otherwise, naming what is too much. */
export function requireOwnRights(caller: Caller, wanted: readonly Permission[]): void {
  const tooMuch = wanted.filter((permission) => !caller.permissions.has(permission));
  if (tooMuch.length === 0) return;
  const detail = `You may not give a token what you may not do yourself: ${tooMuch.join(", ")}.`;
  throw new ProblemError({ status: 403, code: "more-than-own-rights", detail });
}

/** One's own tokens, a token itself, and everyone's for who manages people. */
export function mayRevoke(caller: Caller, token: AccessToken): boolean {
  if (caller.permissions.has("people:manage")) return true;
  if (caller.tokenId !== null) return caller.tokenId === token.id;
  return token.person.id === caller.personId;
}
