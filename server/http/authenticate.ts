import type { Request } from "express";
import { ProblemError } from "../errors";
import { callerByToken, callerOfSession } from "../features/accounts";
import type { Services } from "../services";
import type { Caller } from "./route";

/**
 * Who calls, by bearer token or session cookie.
 *
 * @throws ProblemError 401 where neither is valid.
 */
export async function authenticate(request: Request, services: Services): Promise<Caller> {
  const header = request.get("authorization");
  const caller =
    header === undefined ? await callerOfSession(request, services) : await callerByToken(header, services);
  if (caller) return caller;
  const detail =
    header === undefined
      ? "You are not signed in, or your session has ended. Sign in and try again."
      : "This access token is unknown, expired or revoked.";
  throw new ProblemError({ status: 401, code: "not-signed-in", detail, headers: { "WWW-Authenticate": "Bearer" } });
}
