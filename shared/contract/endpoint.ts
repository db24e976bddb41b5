import type { z } from "zod";
import type { Permission } from "./permissions";

export type Method = "GET" | "POST" | "PUT" | "DELETE";

type Shape = z.ZodType | undefined;

/**
 * One endpoint of the HTTP interface. The server validates by it, the client infers its types from it,
 * and the OpenAPI description is written from it, so the three cannot drift apart.
 */
export type Endpoint<
  Params extends Shape = Shape,
  Query extends Shape = Shape,
  Body extends Shape = Shape,
  Response extends Shape = Shape,
> = {
  method: Method;
  /** Express path, for example "/api/extracts/:id". */
  path: string;
  summary: string;
  /** "public" needs no sign-in; anything else is checked before the body is read. */
  permission: Permission | "public";
  params?: Params;
  query?: Query;
  body?: Body;
  /** What a success answers; absent for 204, streams and files. */
  response?: Response;
  /** Status of a success; by default 200, or 204 without a response. */
  status?: number;
  /** The body is multipart/form-data with one file; `body` describes its other fields. */
  multipart?: boolean;
  /** Media type of a success when it is no JSON. */
  produces?: string;
  /** May answer 202 with the job's address in Location instead, where the work is long. */
  orAccepted?: boolean;
  /** Allowed to a person who still has to replace a one-time password. */
  beforePasswordChange?: boolean;
};

/** Names an endpoint and keeps its exact types. */
export function defineEndpoint<
  Params extends Shape = undefined,
  Query extends Shape = undefined,
  Body extends Shape = undefined,
  Response extends Shape = undefined,
>(endpoint: Endpoint<Params, Query, Body, Response>): Endpoint<Params, Query, Body, Response> {
  return endpoint;
}

/** The parsed type of a schema that may be absent. */
export type Parsed<S extends Shape> = S extends z.ZodType ? z.output<S> : undefined;
/** The type a caller sends for a schema that may be absent. */
export type Sent<S extends Shape> = S extends z.ZodType ? z.input<S> : undefined;

export type ResponseOf<E> = E extends Endpoint<Shape, Shape, Shape, infer R> ? Parsed<R> : never;
/** What the server hands to a handler, parsed. */
export type ParsedParams<E> = E extends Endpoint<infer P, Shape, Shape, Shape> ? Parsed<P> : never;
export type ParsedQuery<E> = E extends Endpoint<Shape, infer Q, Shape, Shape> ? Parsed<Q> : never;
export type ParsedBody<E> = E extends Endpoint<Shape, Shape, infer B, Shape> ? Parsed<B> : never;
/** What a caller sends. */
export type BodyOf<E> = E extends Endpoint<Shape, Shape, infer B, Shape> ? Sent<B> : never;
export type QueryOf<E> = E extends Endpoint<Shape, infer Q, Shape, Shape> ? Sent<Q> : never;
export type ParamsOf<E> = E extends Endpoint<infer P, Shape, Shape, Shape> ? Sent<P> : never;
