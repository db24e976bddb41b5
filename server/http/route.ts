import type { EntityManager } from "@mikro-orm/postgresql";
import type { Request, RequestHandler, Response } from "express";
import type { Endpoint, ParsedBody, ParsedParams, ParsedQuery, ResponseOf } from "@shared/contract/endpoint";
import type { Permission } from "@shared/contract/permissions";
import type { Services } from "../services";

/** Who calls: a person signed in by session, or a script by a person's access token. */
export type Caller = {
  personId: string;
  name: string;
  /** The role's permissions, cut to the token's where a token calls. */
  permissions: ReadonlySet<Permission>;
  /** Codes of the categories this person decides on; "*" is every one. */
  categories: readonly string[];
  tokenId: string | null;
  /** Signed in with a one-time password: nothing but a new password is allowed. */
  mustChangePassword: boolean;
};

/** One request after every check: everything is parsed, and the caller may do this. */
export type Call<E extends Endpoint> = {
  params: ParsedParams<E>;
  query: ParsedQuery<E>;
  body: ParsedBody<E>;
  /** The request's own unit of work; services flush it once. */
  em: EntityManager;
  services: Services;
  request: Request;
  response: Response;
  requestId: string;
  now: Date;
};

export type SignedInCall<E extends Endpoint> = Call<E> & { caller: Caller };

/** Named throttles; `server/http/throttle.ts` says how much each allows. */
export type ThrottleName = "sign-in" | "write" | "read" | "upload";

/** A step of a request's way that needs what the process is made of. */
export type RequestStep = (services: Services) => RequestHandler;

export type Route = {
  endpoint: Endpoint;
  throttle: ThrottleName;
  /** Runs after the permission check and before the body is validated: reads a multipart body. */
  before?: RequestStep[];
  handle: (call: SignedInCall<Endpoint>) => Promise<unknown>;
};

type Options = { throttle?: ThrottleName; before?: RequestStep[] };

const throttleOf = (endpoint: Endpoint, options: Options): ThrottleName =>
  options.throttle ?? (endpoint.method === "GET" ? "read" : "write");

/**
 * Ties an endpoint of the contract to its handler. The handler answers what the presenter made; it may set status and
 * headers on `response`, and answers itself (a stream) by returning undefined after ending the response.
 */
export function route<E extends Endpoint>(
  endpoint: E,
  handle: (call: SignedInCall<E>) => Promise<ResponseOf<E> | undefined>,
  options: Options = {},
): Route {
  if (endpoint.permission === "public") {
    throw new Error(`${endpoint.method} ${endpoint.path} is public: use publicRoute.`);
  }
  // The table of routes is of mixed endpoints; `mount` calls each handler with what its own endpoint parsed.
  return {
    endpoint,
    throttle: throttleOf(endpoint, options),
    before: options.before,
    handle: handle as Route["handle"],
  };
}

/** The same for an endpoint that needs no sign-in: there is no caller. */
export function publicRoute<E extends Endpoint>(
  endpoint: E,
  handle: (call: Call<E>) => Promise<ResponseOf<E> | undefined>,
  options: Options = {},
): Route {
  if (endpoint.permission !== "public") {
    throw new Error(`${endpoint.method} ${endpoint.path} is not public: use route.`);
  }
  return {
    endpoint,
    throttle: throttleOf(endpoint, options),
    before: options.before,
    handle: handle as Route["handle"],
  };
}
