import type { NextFunction, Request, RequestHandler, Response } from "express";
import type { Endpoint } from "@shared/contract/endpoint";
import { ProblemError } from "../errors";
import type { Services } from "../services";
import { authenticate } from "./authenticate";
import type { Caller } from "./route";

/** Lets through who is signed in and may do what the endpoint does, and leaves the caller in `response.locals`. */
export function requirePermission(endpoint: Endpoint, services: Services): RequestHandler {
  return (request: Request, response: Response, next: NextFunction) => {
    authenticate(request, services)
      .then((caller) => {
        check(caller, endpoint);
        response.locals.caller = caller;
        next();
      })
      .catch(next);
  };
}

function check(caller: Caller, { permission, beforePasswordChange }: Endpoint): void {
  if (caller.mustChangePassword && !beforePasswordChange) {
    const detail = "You signed in with a one-time password. Choose a password of your own first.";
    throw new ProblemError({ status: 403, code: "password-change-needed", detail });
  }
  if (permission === "public" || caller.permissions.has(permission)) return;
  const detail =
    caller.tokenId === null
      ? "Your roles do not allow this. Ask an administrator of the chain if you need it."
      : `This access token, or its maker's roles today, do not allow this: it needs "${permission}".`;
  throw new ProblemError({ status: 403, code: "not-allowed", detail });
}
