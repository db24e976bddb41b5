import { createHash } from "node:crypto";
import type { Request, RequestHandler } from "express";
import { RateLimiterPostgres, RateLimiterRes } from "rate-limiter-flexible";
import { ProblemError } from "../errors";
import type { Services } from "../services";
import { networkOf } from "./network-of";
import type { ThrottleName } from "./route";

const minuteSeconds = 60;
const quarterSeconds = 15 * minuteSeconds;

/** How often within how many seconds. */
const allowances = {
  /** Sign-ins from one network address, right or wrong: each costs a tenth of a second of computing. */
  "sign-in": { points: 60, duration: minuteSeconds },
  /** Calls that write, by one person (or address, for scripts). */
  write: { points: 600, duration: minuteSeconds },
  upload: { points: 60, duration: minuteSeconds },
  /** Wrong passwords for one account, from wherever. */
  "account-guesses": { points: 10, duration: quarterSeconds },
  /** Wrong passwords from one network address: an office shares one, so it allows more. */
  "address-guesses": { points: 30, duration: quarterSeconds },
} as const;

type Allowance = keyof typeof allowances;

const limiters = new WeakMap<Services, Map<Allowance, RateLimiterPostgres>>();

/**
 * A limiter of this process; its counters are in PostgreSQL, so all web processes share them. The package removes
 * counters an hour after they ran out.
 */
function limiterOf(name: Allowance, services: Services): RateLimiterPostgres {
  const made = limiters.get(services) ?? new Map<Allowance, RateLimiterPostgres>();
  limiters.set(services, made);
  const existing = made.get(name);
  if (existing) return existing;
  const limiter = new RateLimiterPostgres({
    storeClient: services.pool,
    storeType: "pool",
    tableName: "rate_limits",
    tableCreated: true,
    keyPrefix: name,
    ...allowances[name],
  });
  made.set(name, limiter);
  return limiter;
}

/** Refuses with 429 and Retry-After what comes too often. Reads are not counted: that would make each of them write. */
export function throttle(name: ThrottleName, services: Services): RequestHandler {
  if (name === "read") return (_request, _response, next) => next();
  return (request, _response, next) => {
    consume(limiterOf(name, services), name === "sign-in" ? addressOf(request) : callerOf(request)).then(
      () => next(),
      next,
    );
  };
}

const addressOf = (request: Request) => networkOf(request.ip ?? "unknown");

/** A session is known by now, so people who share an office's address do not share an allowance. */
const callerOf = (request: Request) => request.session?.personId ?? addressOf(request);

/**
 * Counts a guess at a password before it is checked, so that guesses made at the same time count too; `succeeded`
 * takes it back.
 *
 * @throws ProblemError 429 where the account or the network address has had too many wrong ones.
 */
export async function guardAgainstGuessing(
  services: Services,
  { account, address }: { account: string; address: string },
): Promise<{ succeeded: () => Promise<void> }> {
  const byAddress = limiterOf("address-guesses", services);
  const byAccount = limiterOf("account-guesses", services);
  const network = networkOf(address);
  // The key is as long as the column allows however long the text, and no address stays readable in the table.
  const accountKey = createHash("sha256").update(account.toLowerCase()).digest("hex");
  await consume(byAddress, network);
  await consume(byAccount, accountKey);
  return {
    async succeeded() {
      await Promise.all([byAddress.reward(network), byAccount.delete(accountKey)]);
    },
  };
}

async function consume(limiter: RateLimiterPostgres, key: string): Promise<void> {
  try {
    await limiter.consume(key);
  } catch (reason) {
    throw reason instanceof RateLimiterRes ? tooMany(reason) : reason;
  }
}

function tooMany(result: RateLimiterRes): ProblemError {
  const seconds = Math.max(1, Math.ceil(result.msBeforeNext / 1000));
  const wait = seconds < 120 ? `${seconds} seconds` : `${Math.ceil(seconds / 60)} minutes`;
  const detail = `There were too many tries. Wait ${wait} and try again.`;
  return new ProblemError({
    status: 429,
    code: "too-many-requests",
    detail,
    headers: { "Retry-After": String(seconds) },
  });
}
