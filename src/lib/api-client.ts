import type { Endpoint, BodyOf, ParamsOf, QueryOf, ResponseOf } from "@shared/contract/endpoint";
import { ApiError, parseJson, readProblem, unreachable } from "./api-error";
import { addressOf } from "./address";

type AnyEndpoint = Endpoint;
/** Asks for a part only where the endpoint has one. */
type Part<Name extends string, Value> = [Value] extends [undefined]
  ? { [K in Name]?: undefined }
  : { [K in Name]: Value };
type OptionalPart<Name extends string, Value> = [Value] extends [undefined]
  ? { [K in Name]?: undefined }
  : { [K in Name]?: Value };

export type CallOptions<E extends AnyEndpoint> = Part<"params", ParamsOf<E>> &
  OptionalPart<"query", QueryOf<E>> &
  Part<"body", BodyOf<E>> & { headers?: Record<string, string>; signal?: AbortSignal };

/** The same parts once the endpoint's types have done their work. */
type SentParts = {
  params?: object;
  query?: object;
  body?: unknown;
  headers?: Record<string, string>;
  signal?: AbortSignal;
};

export type Answer<E extends AnyEndpoint> = { data: ResponseOf<E>; status: number; headers: Headers };

/** One request by its contract. Throws ApiError and does nothing else about failure: views decide what to show. */
export async function call<E extends AnyEndpoint>(endpoint: E, options: CallOptions<E>): Promise<ResponseOf<E>> {
  return (await callWithHeaders(endpoint, options)).data;
}

/** As `call`, with status and headers, for those who need `ETag` or `Location`. */
export async function callWithHeaders<E extends AnyEndpoint>(endpoint: E, options: CallOptions<E>): Promise<Answer<E>> {
  const response = await send(endpoint, options as SentParts);
  const text = await response.text();
  if (!response.ok) {
    throw readProblem({ status: response.status, text, header: (name) => response.headers.get(name) });
  }
  return { data: readAnswer(endpoint, text), status: response.status, headers: response.headers };
}

/** An endpoint's address: `:name` parts filled in, then the query. */
export const endpointAddress = (endpoint: AnyEndpoint, parts: { params?: object; query?: object } = {}): string => {
  const values = new Map(Object.entries(parts.params ?? {}));
  const path = endpoint.path.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(String(values.get(name))));
  return addressOf(path, parts.query);
};

async function send(endpoint: AnyEndpoint, options: SentParts): Promise<Response> {
  const hasBody = options.body !== undefined;
  try {
    return await fetch(endpointAddress(endpoint, options), {
      method: endpoint.method,
      credentials: "same-origin",
      headers: {
        accept: "application/json",
        ...(hasBody && { "content-type": "application/json" }),
        ...options.headers,
      },
      body: hasBody ? JSON.stringify(options.body) : undefined,
      signal: options.signal,
    });
  } catch (cause) {
    if (options.signal?.aborted) throw cause;
    throw unreachable();
  }
}

/** Holds an answer to its contract, so that a mismatch is said where it enters and not three screens later. */
export function readAnswer<E extends AnyEndpoint>(endpoint: E, text: string): ResponseOf<E> {
  if (!endpoint.response) return undefined as ResponseOf<E>;
  const parsed = endpoint.response.safeParse(parseJson(text));
  if (parsed.success) return parsed.data as ResponseOf<E>;
  throw new ApiError({
    status: 200,
    code: "unexpected-answer",
    detail: `The answer to ${endpoint.path} is not what this page expects. Reload the page; it may be out of date.`,
    errors: parsed.error.issues.slice(0, 5).map((issue) => ({ path: issue.path.join("."), message: issue.message })),
  });
}
