import type { Express, Request, RequestHandler, Response } from "express";
import type { z } from "zod";
import type { Endpoint } from "@shared/contract/endpoint";
import { ProblemError } from "../errors";
import type { Services } from "../services";
import { readBody } from "./read-body";
import { requirePermission } from "./require-permission";
import type { Route, SignedInCall } from "./route";
import { throttle } from "./throttle";

/** Puts every route on the application; each declares its permission, or this throws at the start. */
export function mount(app: Express, routes: readonly Route[], services: Services): void {
  for (const route of routes) {
    const { endpoint } = route;
    if (!endpoint.permission) throw new Error(`${endpoint.method} ${endpoint.path} declares no permission.`);
    const method = endpoint.method.toLowerCase() as "get" | "post" | "put" | "delete";
    app[method](endpoint.path, ...stepsOf(route, services));
  }
}

/** Rate limit, signed in and allowed, body read, then validation and the handler. */
function stepsOf(route: Route, services: Services): RequestHandler[] {
  const { endpoint } = route;
  return [
    throttle(route.throttle, services),
    ...(endpoint.permission === "public" ? [] : [requirePermission(endpoint, services)]),
    ...readBody(endpoint),
    ...(route.before ?? []).map((step) => step(services)),
    (request, response, next) => answer({ route, services, request, response }).catch(next),
  ];
}

type Exchange = { route: Route; services: Services; request: Request; response: Response };

async function answer({ route, services, request, response }: Exchange): Promise<void> {
  const { endpoint } = route;
  const call: SignedInCall<Endpoint> = {
    params: parse(endpoint.params, request.params, "params"),
    query: parse(endpoint.query, request.query, "query"),
    body: parse(endpoint.body, request.body, "body"),
    caller: response.locals.caller,
    em: services.orm.em.fork(),
    services,
    request,
    response,
    requestId: String(request.id),
    now: services.now(),
  };
  const result = await route.handle(call);
  if (response.headersSent || response.writableEnded) return;
  const status =
    response.statusCode !== 200 ? response.statusCode : (endpoint.status ?? (endpoint.response ? 200 : 204));
  if (result === undefined) response.status(status).end();
  else response.status(status).json(result);
}

function parse(schema: z.ZodType | undefined, value: unknown, part: "params" | "query" | "body"): undefined {
  if (!schema) return undefined;
  const result = schema.safeParse(value);
  // The types are restored by `route`, which pairs this endpoint with a handler of the same endpoint.
  if (result.success) return result.data as undefined;
  // An identifier that cannot exist is simply not there.
  if (part === "params") {
    throw new ProblemError({ status: 404, code: "not-found", detail: "There is nothing at this address." });
  }
  const errors = result.error.issues.map((issue) => ({ path: issue.path.join("."), message: issue.message }));
  const detail =
    value === undefined ? "The request needs a body: JSON, with Content-Type application/json." : describe(errors);
  throw new ProblemError({ status: 422, code: "invalid-request", detail, errors });
}

function describe([first, ...more]: { path: string; message: string }[]): string {
  if (!first) return "What was sent cannot be used.";
  const where = first.path === "" ? "" : `${first.path}: `;
  const rest = more.length === 0 ? "" : ` (and ${more.length} more)`;
  return `What was sent cannot be used. ${where}${first.message.replace(/\.$/, "")}${rest}.`;
}
