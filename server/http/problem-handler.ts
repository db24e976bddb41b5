import type { ErrorRequestHandler, RequestHandler } from "express";
import type { Problem } from "@shared/contract/common";
import { ProblemError } from "../errors";
import { knownProblem } from "./known-problem";

const titles: Record<number, string> = {
  400: "Bad request",
  401: "Not signed in",
  403: "Not allowed",
  404: "Not found",
  409: "Conflict",
  412: "Changed meanwhile",
  413: "Too large",
  415: "Unsupported kind of content",
  422: "Cannot be used",
  428: "Version needed",
  429: "Too many requests",
  500: "Something went wrong",
  503: "Not available now",
};

/** Anything that matched no route. */
export const unknownPath: RequestHandler = (request, _response, next) => {
  next(
    new ProblemError({
      status: 404,
      code: "unknown-path",
      detail: `There is nothing at ${request.method} ${request.originalUrl.split("?")[0]}.`,
    }),
  );
};

/** The one place where errors become problem details; what is not known shows only its request id. */
export const problemHandler: ErrorRequestHandler = (error, request, response, next) => {
  const problem = knownProblem(error) ?? unexpected();
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
  response
    .set(problem.headers ?? {})
    .status(problem.status)
    .type("application/problem+json")
    .send(JSON.stringify(body));
};

function unexpected(): ProblemError {
  const detail = "Something went wrong. Nothing was changed; quote the request id if it happens again.";
  return new ProblemError({ status: 500, code: "unexpected", detail });
}
