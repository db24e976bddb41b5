import { describe, expect, it } from "vitest";
import { permissionSchema } from "@shared/contract/permissions";
import { describeEndpoints } from "../../server/http/openapi";
import { contractEndpoints, nameOf } from "../support/contract-endpoints";

const endpoints = contractEndpoints();
const document = describeEndpoints(endpoints);

type Operation = {
  summary: string;
  operationId: string;
  security: Record<string, string[]>[];
  parameters?: { name: string; in: string; required: boolean; schema: Record<string, unknown> }[];
  requestBody?: { required: boolean; content: Record<string, { schema: Record<string, unknown> }> };
  responses: Record<string, { description: string; content?: Record<string, { schema: Record<string, unknown> }> }>;
};

function operationOf(method: string, path: string): Operation {
  const operation = document.paths[path]?.[method];
  if (!operation) throw new Error(`${method} ${path} is not described.`);
  return operation as Operation;
}
const operations = endpoints.map((endpoint) => ({
  endpoint,
  operation: operationOf(endpoint.method.toLowerCase(), endpoint.path.replace(/:(\w+)/g, "{$1}")),
}));

describe("the OpenAPI description", () => {
  it("says that it is OpenAPI 3.1, and of what", () => {
    expect(document.openapi).toMatch(/^3\.1\.\d+$/);
    expect(document.info).toMatchObject({ title: "Shelftide", version: expect.any(String) });
  });

  it("describes each endpoint of the contract once, under a name of its own", () => {
    const described = Object.entries(document.paths).flatMap(([path, methods]) =>
      Object.keys(methods).map((method) => `${method.toUpperCase()} ${path}`),
    );
    expect(described.sort()).toEqual(endpoints.map((endpoint) => nameOf(endpoint).replace(/:(\w+)/g, "{$1}")).sort());
    const ids = operations.map(({ operation }) => operation.operationId);
    expect(new Set(ids).size).toBe(ids.length);
  });

  it("asks for a session or a token with the endpoint's permission, and for nothing where it is public", () => {
    for (const { endpoint, operation } of operations) {
      const { permission } = endpoint;
      expect(operation.security, nameOf(endpoint)).toEqual(
        permission === "public" ? [] : [{ session: [permission] }, { token: [permission] }],
      );
      if (permission !== "public") expect(permissionSchema.options).toContain(permission);
    }
    expect(document.components.securitySchemes).toMatchObject({
      session: { type: "apiKey", in: "cookie" },
      token: { type: "http", scheme: "bearer" },
    });
  });

  it("gives each address's parameters, as required, and no other", () => {
    for (const { endpoint, operation } of operations) {
      const inPath = (operation.parameters ?? []).filter((parameter) => parameter.in === "path");
      expect(
        inPath.map(({ name }) => `:${name}`),
        nameOf(endpoint),
      ).toEqual(endpoint.path.match(/:\w+/g) ?? []);
      expect(inPath.every(({ required }) => required)).toBe(true);
    }
    const { parameters } = operationOf("get", "/api/extracts/{id}/issues");
    expect(parameters?.find(({ name }) => name === "limit")).toMatchObject({
      in: "query",
      required: false,
      schema: { default: 100, maximum: 1000 },
    });
  });

  it("gives a body to each endpoint that reads one, and a file to an upload", () => {
    for (const { endpoint, operation } of operations) {
      expect(Boolean(operation.requestBody), nameOf(endpoint)).toBe(Boolean(endpoint.body));
    }
    expect(operationOf("post", "/api/session").requestBody).toMatchObject({
      required: true,
      content: { "application/json": { schema: { type: "object", required: ["email", "password"] } } },
    });
    expect(operationOf("post", "/api/extracts").requestBody?.content["multipart/form-data"]?.schema).toMatchObject({
      properties: { file: { type: "string", format: "binary" }, kind: { enum: expect.arrayContaining(["sales"]) } },
      required: ["kind", "file"],
    });
    expect(operationOf("post", "/api/scenarios/{id}/predict").requestBody?.required).toBe(false);
  });

  it("gives a success, and problem details for everything that can go wrong", () => {
    for (const { endpoint, operation } of operations) {
      const successes = Object.keys(operation.responses).filter((status) => status.startsWith("2"));
      expect(successes, nameOf(endpoint)).toHaveLength(endpoint.orAccepted ? 2 : 1);
      for (const [status, response] of Object.entries(operation.responses)) {
        expect(response.description, `${nameOf(endpoint)} ${status}`).not.toBe("");
        if (!status.startsWith("2")) {
          expect(Object.keys(response.content ?? {})).toEqual(["application/problem+json"]);
        }
      }
      if (endpoint.permission !== "public") expect(operation.responses).toMatchObject({ 401: {}, 403: {} });
    }
    expect(document.components.schemas.Problem).toMatchObject({
      type: "object",
      required: expect.arrayContaining(["type", "title", "status", "detail", "code", "requestId"]),
    });
  });

  it("says where the job is that long work goes on in", () => {
    for (const path of ["/api/models", "/api/extracts/{id}/load"]) {
      expect(operationOf("post", path).responses).toMatchObject({
        202: { headers: { Location: { schema: { type: "string" } } } },
      });
    }
  });

  it("refers only to what it defines, and can be written as JSON", () => {
    const text = JSON.stringify(document);
    const references = [...text.matchAll(/"\$ref":"([^"]+)"/g)].map((match) => match[1]);
    expect(new Set(references)).toEqual(new Set(["#/components/schemas/Problem"]));
    expect(JSON.parse(text)).toEqual(document);
  });
});
