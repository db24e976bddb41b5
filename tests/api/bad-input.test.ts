import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Endpoint } from "@shared/contract/endpoint";
import { roleSchema } from "@shared/contract/permissions";
import { nameOf } from "../support/contract-endpoints";
import { mountedEndpoints, pathOf } from "../support/mounted-routes";
import { signedInAs } from "../support/people";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let agent: Awaited<ReturnType<typeof signedInAs>>;
let endpoints: Endpoint[];

beforeAll(async () => {
  test = await startTestApp();
  agent = await signedInAs(test.app, test.services, [...roleSchema.options]);
  endpoints = mountedEndpoints(test.app);
});
afterAll(() => test.stop());

const withJson = () => endpoints.filter(({ body, multipart }) => body && !multipart);
const send = (endpoint: Endpoint, path = pathOf(endpoint)) =>
  agent[endpoint.method.toLowerCase() as "get" | "post" | "put" | "delete"](path);

describe("a body that cannot be used", () => {
  it("is refused at every route where it is not valid JSON", async () => {
    for (const endpoint of withJson()) {
      expectProblem(
        await send(endpoint).set("Content-Type", "application/json").send('{"name": '),
        400,
        "malformed-json",
      );
      expectProblem(await send(endpoint).set("Content-Type", "application/json").send('"text"'), 400, "malformed-json");
    }
  });

  it("is refused at every route where it is no JSON at all", async () => {
    for (const endpoint of withJson()) {
      expectProblem(
        await send(endpoint).set("Content-Type", "text/plain").send("name=x"),
        415,
        "unsupported-content-type",
      );
      expectProblem(await send(endpoint).type("form").send({ name: "x" }), 415, "unsupported-content-type");
      expectProblem(
        await send(endpoint).set("Content-Type", "application/json; charset=latin1").send("{}"),
        415,
        "unsupported-encoding",
      );
    }
  });

  it("is refused at every route where it is a list or has other types, with the parts that are wrong", async () => {
    for (const endpoint of withJson()) {
      const response = await send(endpoint).send([1, 2]);
      expect(response.status, nameOf(endpoint)).toBe(422);
      expectProblem(response, 422, "invalid-request");
      expect(response.body.errors.length, nameOf(endpoint)).toBeGreaterThan(0);
    }
  });

  it("is refused where it is missing, unless the route has a default for it", async () => {
    for (const endpoint of withJson().filter(({ body }) => !body?.safeParse(undefined).success)) {
      expectProblem(await send(endpoint), 422, "invalid-request");
    }
  });

  it(
    "is refused while it is read where it is too large, whatever it says of its size",
    { timeout: 60_000 },
    async () => {
      const large = JSON.stringify({ name: "x".repeat(17 * 1024 * 1024) });
      expectProblem(
        await agent.put("/api/chain").set("Content-Type", "application/json").send(large),
        413,
        "body-too-large",
      );
      const small = JSON.stringify({ email: "x".repeat(20_000), password: "x" });
      expectProblem(
        await request(test.app).post("/api/session").set("Content-Type", "application/json").send(small),
        413,
        "body-too-large",
      );
    },
  );

  it("is refused with a sentence where a text holds what the database cannot keep", async () => {
    const response = await agent.post("/api/tokens").send({ name: "a\u0000b", permissions: ["read"] });
    expectProblem(response, 422, "unusable-characters");
  });

  it("is refused by an upload that is no multipart form", async () => {
    for (const endpoint of endpoints.filter(({ multipart }) => multipart)) {
      expectProblem(await send(endpoint).send({ kind: "sales" }), 415, "unsupported-content-type");
    }
  });
});

describe("an address that cannot be used", () => {
  it("answers that there is no such thing for an unknown or impossible identifier", async () => {
    for (const endpoint of endpoints.filter(({ params }) => params)) {
      // Codes are the chain's own: there is no impossible one.
      if (endpoint.path.includes(":id")) expectProblem(await send(endpoint, pathOf(endpoint, "no-identifier")), 404, "not-found");
      // What else the route needs is looked at before it looks for the thing.
      const needsMore = [endpoint.body, endpoint.query].some((schema) => schema && !schema.safeParse({}).success);
      if (!needsMore) expectProblem(await send(endpoint).send(endpoint.body ? {} : undefined), 404, "not-found");
    }
  });

  it("answers problem details where there is nothing, or the encoding is broken", async () => {
    expectProblem(await agent.get("/api/nothing/here"), 404, "unknown-path");
    expectProblem(await agent.post("/api/health"), 404, "unknown-path");
    expectProblem(await agent.get("/api/jobs/%E0%A4%A"), 400, "malformed-address");
  });

  it("refuses a parameter that is wrong or given twice, and says which", async () => {
    const response = await agent.get("/api/comparisons?product=1&product=2&points=many");
    expectProblem(response, 422, "invalid-request");
    expect(response.body.errors.map(({ path }: { path: string }) => path).sort()).toEqual(["points", "product"]);
  });
});
