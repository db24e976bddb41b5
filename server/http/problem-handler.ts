import type { ErrorRequestHandler, RequestHandler } from "express";
import { OptimisticLockError } from "@mikro-orm/core";
import type { Problem } from "@shared/contract/common";
import { ProblemError } from "../errors";

const titles: Record<number, string> = {
  400: "Bad request", 401: "Not signed in", 403: "Not allowed", 404: "Not found", 409: "Conflict", 412: "Changed meanwhile",
  413: "Too large", 415: "Unsupported kind of content", 422: "Cannot be used", 428: "Version needed", 429: "Too many requests",
  500: "Something went wrong", 503: "Not available now",
};

/** Anything that matched no route. */
export const unknownPath: RequestHandler = (request, _response, next) => {
  next(new ProblemError({ status: 404, code: "unknown-path", detail: `There is nothing at ${request.method} ${request.path}.` }));
};

/** The one place where errors become problem details; what is not known shows only its request id. */
export const problemHandler: ErrorRequestHandler = (error, request, response, next) => {
  const problem = known(error);
  if (problem.status >= 500) request.log.error({ err: error }, "request failed");
  if (response.headersSent) {
    next(error);
    return;
  }
  const body: Problem = {
    type: `urn:shelftide:problem:${problem.code}`,
    title: titles[problem.status] ?? "Error",
    status: problem.status,
    detail: problem.message,
    code: problem.code,
    requestId: String(request.id),
    ...(problem.errors && { errors: problem.errors }),
  };
  response.set(problem.headers ?? {}).status(problem.status).type("application/problem+json").send(JSON.stringify(body));
};

function known(error: unknown): ProblemError {
  if (error instanceof ProblemError) return error;
  if (error instanceof OptimisticLockError) {
    return new ProblemError({ status: 412, code: "changed-meanwhile", detail: "Someone saved this meanwhile. Read it again, then repeat your change." });
  }
  return bodyParserProblem(error) ?? new ProblemError({ status: 500, code: "unexpected", detail: "Something went wrong. Nothing was changed; quote the request id if it happens again." });
}

/** Errors of the JSON body parser and of the router carry `type` and `status`. */
function bodyParserProblem(error: unknown): ProblemError | undefined {
  if (!(error instanceof Error)) return undefined;
  const { type } = error as { type?: string };
  if (type === "entity.parse.failed") return new ProblemError({ status: 400, code: "malformed-json", detail: "The body is not valid JSON." });
  if (type === "entity.too.large") return new ProblemError({ status: 413, code: "body-too-large", detail: "The body is larger than this address accepts." });
  if (type?.startsWith("charset.") || type?.startsWith("encoding.")) return new ProblemError({ status: 415, code: "unsupported-encoding", detail: "Send the body as UTF-8 JSON." });
  if (error instanceof URIError) return new ProblemError({ status: 400, code: "malformed-address", detail: "The address is not properly encoded." });
  return undefined;
}
