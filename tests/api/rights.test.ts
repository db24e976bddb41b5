import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Endpoint } from "@shared/contract/endpoint";
import { permissionSchema, permissionsOf, roleSchema, type Role } from "@shared/contract/permissions";
import { contractEndpoints, nameOf } from "../support/contract-endpoints";
import { mountedEndpoints, mountedNames, pathOf } from "../support/mounted-routes";
import { addPerson, signedIn, signedInAs } from "../support/people";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let endpoints: Endpoint[];

beforeAll(async () => {
  test = await startTestApp();
  endpoints = mountedEndpoints(test.app);
});
afterAll(() => test.stop());

const methodOf = ({ method }: Endpoint) => method.toLowerCase() as "get" | "post" | "put" | "delete";

describe("the router", () => {
  it("holds exactly what the contract defines, each once", () => {
    expect(mountedNames(test.app).sort()).toEqual(contractEndpoints().map(nameOf).sort());
  });

  it("asks for a permission at every route but those that must work without sign-in", () => {
    const open = endpoints.filter(({ permission }) => permission === "public").map(nameOf);
    expect(open.sort()).toEqual([
      "DELETE /api/session",
      "GET /api/health",
      "GET /api/openapi.json",
      "POST /api/session",
    ]);
    for (const { permission } of endpoints) {
      if (permission !== "public") expect(permissionSchema.options).toContain(permission);
    }
  });
});

describe("every route", () => {
  it("refuses who is not signed in, before it looks at anything else", async () => {
    for (const endpoint of endpoints) {
      const sent = request(test.app)[methodOf(endpoint)](pathOf(endpoint));
      const response = await sent
        .set("Content-Type", "application/json")
        .send(endpoint.method === "GET" ? undefined : "{");
      if (endpoint.permission === "public") expect(response.status, nameOf(endpoint)).not.toBe(401);
      else expectProblem(response, 401, "not-signed-in");
    }
  });

  it.each(roleSchema.options)("lets the role %s do what it allows, and nothing else", async (role: Role) => {
    const agent = await signedInAs(test.app, test.services, [role]);
    const allowed = new Set<string>(permissionsOf([role]));
    for (const endpoint of endpoints.filter(({ permission }) => permission !== "public")) {
      const response = await agent[methodOf(endpoint)](pathOf(endpoint));
      const isRefused = response.status === 403 && response.body.code === "not-allowed";
      expect({ route: nameOf(endpoint), isRefused }).toEqual({
        route: nameOf(endpoint),
        isRefused: !allowed.has(endpoint.permission),
      });
      expect(response.status, nameOf(endpoint)).not.toBe(401);
      expect(response.status, nameOf(endpoint)).toBeLessThan(500);
      if (isRefused) expectProblem(response, 403, "not-allowed");
    }
  });

  it("lets a person without roles sign in and do nothing", async () => {
    const agent = await signedInAs(test.app, test.services, []);
    for (const endpoint of endpoints.filter(({ permission }) => permission !== "public")) {
      expectProblem(await agent[methodOf(endpoint)](pathOf(endpoint)), 403, "not-allowed");
    }
  });

  it("is closed to a one-time password, but for reading the session and choosing a password", async () => {
    const { email } = await addPerson(test.services, {
      email: "new@chain.example",
      roles: [...roleSchema.options],
      mustChangePassword: true,
    });
    const agent = await signedIn(test.app, email);
    const open: string[] = [];
    for (const endpoint of endpoints.filter(({ permission }) => permission !== "public")) {
      const response = await agent[methodOf(endpoint)](pathOf(endpoint));
      if (response.body.code === "password-change-needed") expectProblem(response, 403, "password-change-needed");
      else open.push(nameOf(endpoint));
    }
    expect(open.sort()).toEqual(["GET /api/session", "PUT /api/session/password"]);
  });
});
