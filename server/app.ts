import express, { type Express, type RequestHandler } from "express";
import helmet from "helmet";
import { logRequests, nameRequest } from "./http/log-requests";
import { mount } from "./http/mount";
import { problemHandler, unknownPath } from "./http/problem-handler";
import { sameOrigin } from "./http/same-origin";
import { securityHeaders } from "./http/security-headers";
import { serveClient } from "./http/serve-client";
import { routes } from "./routes";
import type { Services } from "./services";
import { sessions } from "./features/accounts";

/** What one person may read must not come out of a cache for the next; a route that allows keeping says so itself. */
const notKept: RequestHandler = (_request, response, next) => {
  response.set("Cache-Control", "no-store");
  next();
};

/** The whole application over given services; it listens nowhere yet. */
export function createApp(services: Services): Express {
  const app = express();
  app.set("trust proxy", services.environment.TRUST_PROXY);
  app.set("query parser", "simple");
  app.disable("etag");
  app.use(logRequests(services), nameRequest);
  app.use(helmet(securityHeaders(services.environment)));
  app.use("/api", notKept, sameOrigin(services.environment), sessions(services));
  mount(app, routes, services);
  app.use("/api", unknownPath);
  serveClient(app, services.environment);
  // Without a built client nothing else answers here, and the framework would with headers of its own.
  app.use(unknownPath);
  app.use(problemHandler);
  return app;
}
