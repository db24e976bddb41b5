import type { RequestHandler } from "express";
import { randomUUID } from "node:crypto";
import { pinoHttp, type HttpLogger } from "pino-http";
import type { Services } from "../services";

type Logged = { id: unknown; method: string; url: string; remoteAddress: string };

/** One line a request: what was asked, from where, how it went and how long it took. No header, and no body, is logged. */
export function logRequests({ logger, environment }: Services): HttpLogger {
  return pinoHttp({
    logger,
    genReqId: () => randomUUID(),
    autoLogging: environment.NODE_ENV !== "test",
    serializers: {
      req: ({ id, method, url, remoteAddress }: Logged) => ({ id, method, url, remoteAddress }),
      res: ({ statusCode }: { statusCode: number }) => ({ statusCode }),
    },
  });
}

/** The id that the log and problem details name, for people to quote. */
export const nameRequest: RequestHandler = (request, response, next) => {
  response.set("X-Request-Id", String(request.id));
  next();
};
