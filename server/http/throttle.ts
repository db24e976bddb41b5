import type { RequestHandler } from "express";
import { RateLimiterPostgres, RateLimiterRes } from "rate-limiter-flexible";
import { ProblemError } from "../errors";
import type { Services } from "../services";
import type { ThrottleName } from "./route";

/** Requests allowed per address (sign-in) or caller within some seconds. */
const allowances: Record<ThrottleName, { points: number; duration: number }> = {
  "sign-in": { points: 10, duration: 60 },
  write: { points: 600, duration: 60 },
  read: { points: 6000, duration: 60 },
  upload: { points: 60, duration: 60 },
};

const limiters = new WeakMap<Services, Map<ThrottleName, RateLimiterPostgres>>();

/** The named limiter of this process; its counters are in PostgreSQL, so all web processes share them. */
function limiterOf(name: ThrottleName, services: Services): RateLimiterPostgres {
  const made = limiters.get(services) ?? new Map<ThrottleName, RateLimiterPostgres>();
  limiters.set(services, made);
  const existing = made.get(name);
  if (existing) return existing;
  const limiter = new RateLimiterPostgres({
    storeClient: services.pool, storeType: "pool", tableName: "rate_limits", tableCreated: true, keyPrefix: name, ...allowances[name],
    // One process need not ask the database again about an address it knows to be over its allowance.
    inMemoryBlockOnConsumed: allowances[name].points,
  });
  made.set(name, limiter);
  return limiter;
}

/** Refuses with 429 and Retry-After what comes too often from one address. Reads are not counted: they change nothing. */
export function throttle(name: ThrottleName, services: Services): RequestHandler {
  if (name === "read") return (_request, _response, next) => next();
  return (request, _response, next) => {
    limiterOf(name, services)
      .consume(request.ip ?? "unknown")
      .then(() => next())
      .catch((reason: unknown) => next(reason instanceof RateLimiterRes ? tooMany(reason) : reason));
  };
}

function tooMany(result: RateLimiterRes): ProblemError {
  const seconds = Math.max(1, Math.ceil(result.msBeforeNext / 1000));
  const detail = `Too many requests from this address. Wait ${seconds} s and try again.`;
  return new ProblemError({ status: 429, code: "too-many-requests", detail, headers: { "Retry-After": String(seconds) } });
}
