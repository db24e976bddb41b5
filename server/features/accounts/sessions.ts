import connectPgSimple from "connect-pg-simple";
import type { Request, RequestHandler } from "express";
import session from "express-session";
import { permissionsOf } from "@shared/contract/permissions";
import type { Caller } from "../../http/route";
import type { Services } from "../../services";
import type { Person } from "./accounts.entities";
import { noteLastSeen, personById } from "./accounts.repository";

declare module "express-session" {
  interface SessionData {
    personId: string;
    /** The person's password version at sign-in. */
    passwordVersion: number;
    /** Milliseconds since 1970. */
    signedInAt: number;
    lastSeenAt: number;
  }
}

const minuteMs = 60_000;
/** A session ends after this long without a request. */
export const idleLimitMs = 8 * 60 * minuteMs;
/** And this long after sign-in in any case. */
export const absoluteLimitMs = 7 * 24 * 60 * minuteMs;
/** The time of the last request is written at most this often, so that reading does not write. */
const lastSeenEveryMs = minuteMs;
const cookieName = "shelftide_session";

const PostgresStore = connectPgSimple(session);

/**
 * Sessions in PostgreSQL by a cookie that scripts in the page cannot read. Only signing in makes one, and nothing else
 * changes it: a request that began before a sign-out must not write the session back when it ends after it.
 */
export function sessions(services: Services): RequestHandler {
  const { environment, pool, logger } = services;
  return session({
    name: cookieName,
    secret: environment.SESSION_SECRET,
    store: new PostgresStore({
      pool,
      tableName: "user_session",
      disableTouch: true,
      errorLog: (...details: unknown[]) => logger.warn({ details }, "session store"),
    }),
    resave: false,
    saveUninitialized: false,
    cookie: { httpOnly: true, sameSite: "lax", secure: environment.SECURE_COOKIES, path: "/", maxAge: absoluteLimitMs },
  });
}

/** Who is signed in by this request's session; undefined, and the session gone, where it has ended. */
export async function callerOfSession(request: Request, services: Services): Promise<Caller | undefined> {
  const { personId, passwordVersion } = request.session;
  if (!personId) return undefined;
  const nowMs = services.now().getTime();
  const person = hasTimeLeft(request, nowMs) ? await personById(services.orm.em.fork(), personId) : null;
  if (!person || person.disabledAt || person.passwordVersion !== passwordVersion) {
    await endSession(request);
    return undefined;
  }
  if (nowMs - (request.session.lastSeenAt ?? 0) >= lastSeenEveryMs) {
    await noteLastSeen(services.pool, request.sessionID, nowMs);
  }
  return {
    personId: person.id,
    name: person.name,
    permissions: new Set(permissionsOf(person.roles)),
    categories: person.categories,
    tokenId: null,
    mustChangePassword: person.mustChangePassword,
  };
}

function hasTimeLeft(request: Request, nowMs: number): boolean {
  const { signedInAt = 0, lastSeenAt = 0 } = request.session;
  return nowMs - signedInAt < absoluteLimitMs && nowMs - lastSeenAt < idleLimitMs;
}

/** Begins a session under a new id, so that an id planted before sign-in is worth nothing. */
export async function beginSession(request: Request, person: Person, now: Date): Promise<void> {
  await new Promise<void>((resolve, reject) => {
    request.session.regenerate((error) => (error ? reject(error) : resolve()));
  });
  request.session.personId = person.id;
  request.session.passwordVersion = person.passwordVersion;
  request.session.signedInAt = now.getTime();
  request.session.lastSeenAt = now.getTime();
  // Written before the answer, so that the very next request finds it.
  await new Promise<void>((resolve, reject) => {
    request.session.save((error) => (error ? reject(error) : resolve()));
  });
}

/** Ends the request's session, in the store too; the cookie that is left opens nothing. */
export function endSession(request: Request): Promise<void> {
  return new Promise((resolve, reject) => {
    request.session.destroy((error) => (error ? reject(error) : resolve()));
  });
}
