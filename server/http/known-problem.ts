import { OptimisticLockError } from "@mikro-orm/core";
import { ProblemError } from "../errors";

/** What an error means to the caller; undefined where only we can make sense of it. */
export function knownProblem(error: unknown): ProblemError | undefined {
  if (error instanceof ProblemError) return error;
  if (error instanceof OptimisticLockError) {
    return new ProblemError({
      status: 412,
      code: "changed-meanwhile",
      detail: "Someone saved this meanwhile. Read it again, then repeat your change.",
    });
  }
  return databaseProblem(error) ?? httpProblem(error);
}

/** PostgreSQL's classes 08 and 57P, too many connections, and what the socket says where there is no server. */
const unreachable = /^(08|57P)|^53300$|^(ECONNREFUSED|ECONNRESET|EPIPE|ETIMEDOUT|EHOSTUNREACH|ENOTFOUND|EAI_AGAIN)$/;
/** Text with a zero character, which PostgreSQL keeps neither in text nor in JSON. */
const unusableCharacters = new Set(["22021", "22P05"]);

function databaseProblem(error: unknown): ProblemError | undefined {
  const code = codeOf(error);
  const lost =
    error instanceof Error &&
    /^(Connection terminated|timeout exceeded when trying to connect|Knex: Timeout)/.test(error.message);
  if (lost || (code !== undefined && unreachable.test(code))) {
    return new ProblemError({
      status: 503,
      code: "unavailable",
      detail: "Something this needs cannot be reached right now. Try again in a moment.",
    });
  }
  if (code !== undefined && unusableCharacters.has(code)) {
    return new ProblemError({
      status: 422,
      code: "unusable-characters",
      detail: "A text that was sent holds a zero character. Remove it and try again.",
    });
  }
  return undefined;
}

/** The error's own code, or that of one of several tries to connect. */
function codeOf(error: unknown): string | undefined {
  if (error instanceof AggregateError) return codeOf(error.errors[0]);
  if (!(error instanceof Error) || !("code" in error)) return undefined;
  return typeof error.code === "string" ? error.code : undefined;
}

/** Errors of the body parser, the router and the file server carry `type` and `status`. */
function httpProblem(error: unknown): ProblemError | undefined {
  if (!(error instanceof Error)) return undefined;
  const { type, status } = error as { type?: string; status?: number };
  if (type === "entity.parse.failed") {
    return new ProblemError({ status: 400, code: "malformed-json", detail: "The body is not valid JSON." });
  }
  if (type === "entity.too.large") {
    return new ProblemError({
      status: 413,
      code: "body-too-large",
      detail: "The body is larger than this address accepts.",
    });
  }
  if (type?.startsWith("charset.") || type?.startsWith("encoding.")) {
    return new ProblemError({ status: 415, code: "unsupported-encoding", detail: "Send the body as UTF-8 JSON." });
  }
  if (error instanceof URIError) {
    return new ProblemError({ status: 400, code: "malformed-address", detail: "The address is not properly encoded." });
  }
  if (status === 404) {
    return new ProblemError({ status: 404, code: "unknown-path", detail: "There is nothing at this address." });
  }
  if (status !== undefined && status >= 400 && status < 500) {
    return new ProblemError({ status, code: "bad-request", detail: "The request cannot be understood." });
  }
  return undefined;
}
