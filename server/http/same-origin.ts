import type { RequestHandler } from "express";
import { ProblemError } from "../errors";

const safe = new Set(["GET", "HEAD", "OPTIONS"]);

/**
 * Refuses what another site makes a signed-in browser send. Browsers always send Origin or Sec-Fetch-Site with such a
 * request; a script without a browser sends neither and is let through, as are calls by bearer token, which no other
 * site can forge.
 */
export const sameOrigin: RequestHandler = (request, _response, next) => {
  if (safe.has(request.method) || request.get("authorization") !== undefined || isOwn(request.get("origin"), request.get("host"), request.get("sec-fetch-site"))) {
    next();
    return;
  }
  next(new ProblemError({ status: 403, code: "foreign-origin", detail: "This request came from another site and was refused." }));
};

function isOwn(origin: string | undefined, host: string | undefined, fetchSite: string | undefined): boolean {
  if (fetchSite !== undefined && fetchSite !== "same-origin" && fetchSite !== "none") return false;
  if (origin === undefined) return true;
  return URL.canParse(origin) && new URL(origin).host === host;
}
