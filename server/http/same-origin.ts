import type { Request, RequestHandler } from "express";
import type { Environment } from "../environment";
import { ProblemError } from "../errors";

const safe = new Set(["GET", "HEAD", "OPTIONS"]);

/**
 * Refuses what another site makes a signed-in browser send. Browsers send Sec-Fetch-Site or Origin with such a request,
 * and no page can set either; a script without a browser sends neither and is let through, as are calls by bearer
 * token, which no other site can forge.
 */
export function sameOrigin({ PUBLIC_URL }: Pick<Environment, "PUBLIC_URL">): RequestHandler {
  const publicOrigin = PUBLIC_URL === undefined ? undefined : new URL(PUBLIC_URL).origin;
  return (request, _response, next) => {
    if (safe.has(request.method) || request.get("authorization") !== undefined || comesFromUs(request, publicOrigin)) {
      next();
      return;
    }
    next(
      new ProblemError({
        status: 403,
        code: "foreign-origin",
        detail: "This request came from another site and was refused.",
      }),
    );
  };
}

function comesFromUs(request: Request, publicOrigin: string | undefined): boolean {
  // Says itself whether it is the same site, whatever a proxy did to the host; browsers leave it out over plain http.
  const fetchSite = request.get("sec-fetch-site");
  if (fetchSite !== undefined) return fetchSite === "same-origin" || fetchSite === "none";
  const origin = request.get("origin");
  if (origin === undefined || origin === publicOrigin) return true;
  if (!URL.canParse(origin)) return false;
  const { protocol, host } = new URL(origin);
  // `request.host` is the forwarded one where proxies are trusted. Both hosts lose their protocol's default port.
  const own = `${protocol}//${request.host}`;
  return URL.canParse(own) && new URL(own).host === host && host !== "";
}
