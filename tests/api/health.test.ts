import { createServer, type AddressInfo } from "node:net";
import { once } from "node:events";
import pg from "pg";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createApp } from "../../server/app";
import { describeEndpoints } from "../../server/http/openapi";
import { contractEndpoints } from "../support/contract-endpoints";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;

beforeAll(async () => {
  test = await startTestApp();
});
afterAll(() => test.stop());

describe("health", () => {
  it("is ok, without sign-in, while the database answers", async () => {
    const { body } = await request(test.app).get("/api/health").expect(200);
    expect(body).toEqual({ status: "ok" });
  });

  it("is a problem while the database cannot be reached, and so is everything that needs it", async () => {
    const pool = new pg.Pool({ connectionString: "postgres://nobody@127.0.0.1:9/nothing" });
    const app = createApp({ ...test.services, pool });
    expectProblem(await request(app).get("/api/health"), 503, "database-unreachable");
    expectProblem(
      await request(app).post("/api/session").send({ email: "a@chain.example", password: "x" }),
      503,
      "unavailable",
    );
    await pool.end();
  });

  it("is a problem within seconds where the database takes connections and says nothing", async () => {
    const silent = createServer((socket) => socket.on("error", () => undefined)).listen(0, "127.0.0.1");
    await once(silent, "listening");
    const pool = new pg.Pool({
      connectionString: `postgres://nobody@127.0.0.1:${(silent.address() as AddressInfo).port}/nothing`,
    });
    const began = Date.now();
    expectProblem(await request(createApp({ ...test.services, pool })).get("/api/health"), 503, "database-unreachable");
    expect(Date.now() - began).toBeLessThan(10_000);
    silent.close();
  });
});

describe("the description of the interface", () => {
  it("is served without sign-in, and describes every route of the contract", async () => {
    const { body } = await request(test.app).get("/api/openapi.json").expect(200);
    const expected = describeEndpoints(contractEndpoints());
    expect(body.openapi).toBe("3.1.1");
    expect(body.paths).toEqual(JSON.parse(JSON.stringify(expected.paths)));
  });
});
