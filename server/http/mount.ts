import type { Express, NextFunction, Request, RequestHandler, Response } from "express";
import type { z } from "zod";
import type { Endpoint } from "@shared/contract/endpoint";
import { ProblemError } from "../errors";
import type { Services } from "../services";
import { authenticate } from "./authenticate";
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
  const steps: RequestHandler[] = [throttle(route.throttle, services)];
  if (route.endpoint.permission !== "public") steps.push(requirePermission(route.endpoint, services));
  steps.push(...(route.before ?? []).map((step) => step(services)), (request, response, next) => answer({ route, services, request, response }).catch(next));
  return steps;
}

function requirePermission(endpoint: Endpoint, services: Services): RequestHandler {
  return (request: Request, response: Response, next: NextFunction) => {
    authenticate(request, services)
      .then((caller) => {
        if (caller.mustChangePassword && !endpoint.beforePasswordChange) {
          const detail = "You signed in with a one-time password. Choose a password of your own first.";
          throw new ProblemError({ status: 403, code: "password-change-needed", detail });
        }
        if (endpoint.permission !== "public" && !caller.permissions.has(endpoint.permission)) {
          const detail = "Your roles do not allow this. Ask an administrator of the chain if you need it.";
          throw new ProblemError({ status: 403, code: "not-allowed", detail });
        }
        response.locals.caller = caller;
        next();
      })
      .catch(next);
  };
}

async function answer({ route, services, request, response }: { route: Route; services: Services; request: Request; response: Response }) {
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
  const status = response.statusCode !== 200 ? response.statusCode : (endpoint.status ?? (endpoint.response ? 200 : 204));
  if (result === undefined) response.status(status).end();
  else response.status(status).json(result);
}

function parse(schema: z.ZodType | undefined, value: unknown, part: "params" | "query" | "body"): undefined {
  if (!schema) return undefined;
  const result = schema.safeParse(value);
  // The types are restored by `route`, which pairs this endpoint with a handler of the same endpoint.
  if (result.success) return result.data as undefined;
  // An identifier that cannot exist is simply not there.
  if (part === "params") throw new ProblemError({ status: 404, code: "not-found", detail: "There is nothing at this address." });
  const errors = result.error.issues.map((issue) => ({ path: issue.path.join("."), message: issue.message }));
  const missing = value === undefined && part === "body";
  const detail = missing ? "The request has no body, or one that is not JSON." : `What was sent cannot be used: ${errors[0]?.message ?? "it is malformed"}`;
  throw new ProblemError({ status: 422, code: "invalid-request", detail, errors });
}
