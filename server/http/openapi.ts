import { z } from "zod";
import { problemSchema } from "@shared/contract/common";
import type { Endpoint } from "@shared/contract/endpoint";
import { acceptedSchema } from "@shared/contract/jobs";

type Schema = Record<string, unknown>;

/** Problems that any address may answer with, and when. */
const problems: Record<number, string> = {
  400: "The body is not valid JSON, or the address is not properly encoded.",
  401: "Not signed in, or the session or access token has ended.",
  403: "The caller's roles or token do not allow this, or the request came from another site.",
  404: "There is no such thing.",
  413: "The body is too large.",
  415: "The body is of a kind that this address does not take.",
  422: "What was sent cannot be used; `errors` says which part and why.",
  429: "Too many tries; `Retry-After` says when to try again.",
  503: "Something this needs cannot be reached right now.",
};

/**
 * The OpenAPI 3.1 description of endpoints, written from the schemas that the server validates by.
 *
 * @example describeEndpoints([getHealth]).paths["/api/health"].get.operationId // "get-health"
 */
export function describeEndpoints(endpoints: readonly Endpoint[]) {
  const paths: Record<string, Record<string, Schema>> = {};
  for (const endpoint of endpoints) {
    const path = endpoint.path.replace(/:(\w+)/g, "{$1}");
    paths[path] = { ...paths[path], [endpoint.method.toLowerCase()]: describeEndpoint(endpoint) };
  }
  return {
    openapi: "3.1.1",
    info: {
      title: "Shelftide",
      version: "1",
      description:
        "Weekly sales in, driver curves and predicted units out. Long work answers 202 with the address of its job in Location.",
    },
    servers: [{ url: "/" }],
    paths,
    components: {
      securitySchemes: {
        session: {
          type: "apiKey",
          in: "cookie",
          name: "shelftide_session",
          description: "Signed in by POST /api/session.",
        },
        token: { type: "http", scheme: "bearer", description: "An access token made by POST /api/tokens." },
      },
      schemas: { Problem: jsonSchema(problemSchema, "output") },
    },
  };
}

function describeEndpoint(endpoint: Endpoint): Schema {
  const { summary, permission, body } = endpoint;
  const parameters = [...describeParameters(endpoint.params, "path"), ...describeParameters(endpoint.query, "query")];
  return {
    summary,
    operationId: operationId(endpoint),
    tags: [endpoint.path.split("/")[2]],
    security: permission === "public" ? [] : [{ session: [permission] }, { token: [permission] }],
    ...(parameters.length > 0 && { parameters }),
    ...(body && { requestBody: describeBody(endpoint, body) }),
    responses: { ...describeSuccess(endpoint), ...describeProblems(endpoint) },
  };
}

/** "GET /api/extracts/:id/issues" becomes "get-extracts-id-issues". */
function operationId({ method, path }: Endpoint): string {
  const words = path
    .split("/")
    .slice(2)
    .map((word) => word.replace(/\W+/g, ""));
  return [method.toLowerCase(), ...words].join("-");
}

function describeParameters(schema: z.ZodType | undefined, place: "path" | "query"): Schema[] {
  if (!schema) return [];
  const { properties = {}, required = [] } = jsonSchema(schema, "input") as {
    properties?: Record<string, Schema>;
    required?: string[];
  };
  return Object.entries(properties).map(([name, property]) => ({
    name,
    in: place,
    required: place === "path" || required.includes(name),
    schema: property,
  }));
}

function describeBody({ multipart }: Endpoint, body: z.ZodType): Schema {
  const schema = jsonSchema(body, "input") as { properties?: Record<string, Schema>; required?: string[] };
  // A body that has a default may be left out.
  if (!multipart) return { required: !body.safeParse(undefined).success, content: { "application/json": { schema } } };
  const file = { type: "string", format: "binary", description: "The file, kept unchanged." };
  const withFile = {
    ...schema,
    properties: { ...schema.properties, file },
    required: [...(schema.required ?? []), "file"],
  };
  return { required: true, content: { "multipart/form-data": { schema: withFile } } };
}

function describeSuccess({ response, status, produces, orAccepted }: Endpoint): Record<string, Schema> {
  const code = String(status ?? (response || produces ? 200 : 204));
  const location = { Location: { description: "Address of the job to follow.", schema: { type: "string" } } };
  const accepted = { "application/json": { schema: jsonSchema(acceptedSchema, "output") } };
  return {
    ...(orAccepted && {
      202: { description: "It takes longer, and goes on in the background.", headers: location, content: accepted },
    }),
    [code]: {
      description: code === "204" ? "Done; there is no body." : "Success.",
      ...(code === "202" && { headers: location }),
      ...(response && { content: { "application/json": { schema: jsonSchema(response, "output") } } }),
      ...(produces && { content: { [produces]: { schema: { type: "string" } } } }),
    },
  };
}

function describeProblems({ permission, params, query, body, method }: Endpoint): Record<string, Schema> {
  const statuses = [
    ...(permission === "public" ? [] : [401, 403]),
    ...(permission === "public" && method !== "GET" ? [403] : []),
    ...(params ? [404] : []),
    ...(query || body ? [422] : []),
    ...(body ? [400, 413, 415] : []),
    ...(method === "GET" ? [] : [429]),
    503,
  ];
  const content = { "application/problem+json": { schema: { $ref: "#/components/schemas/Problem" } } };
  return Object.fromEntries(statuses.map((status) => [String(status), { description: problems[status], content }]));
}

function jsonSchema(schema: z.ZodType, io: "input" | "output"): Schema {
  // The document's own dialect is meant throughout, so the schemas need not name it.
  const { $schema: _dialect, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: "any" });
  return rest;
}
