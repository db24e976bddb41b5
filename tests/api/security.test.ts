import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createApp } from "../../server/app";
import type { Environment } from "../../server/environment";
import { bearerOf } from "../support/people";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let bearer: string;

beforeAll(async () => {
  test = await startTestApp();
  bearer = await bearerOf(test.app, test.services, ["administrator"]);
});
afterAll(() => test.stop());

const appWith = (changes: Partial<Environment>) =>
  createApp({ ...test.services, environment: { ...test.services.environment, ...changes } });

function directives(policy: string): Record<string, string[]> {
  return Object.fromEntries(
    policy.split(";").map((part) => {
      const [name = "", ...sources] = part.trim().split(/\s+/);
      return [name, sources];
    }),
  );
}

describe("the content security policy", () => {
  it("is on every answer, and allows nothing inline, evaluated or from elsewhere", async () => {
    for (const path of ["/api/health", "/api/chain", "/api/nothing", "/"]) {
      const { headers } = await request(test.app).get(path);
      expect(directives(String(headers["content-security-policy"])), path).toEqual({
        "default-src": ["'self'"],
        "base-uri": ["'none'"],
        "connect-src": ["'self'"],
        "font-src": ["'self'"],
        "form-action": ["'self'"],
        "frame-ancestors": ["'none'"],
        "img-src": ["'self'", "data:", "blob:"],
        "object-src": ["'none'"],
        "script-src": ["'self'"],
        "style-src": ["'self'"],
        "worker-src": ["'self'"],
      });
    }
  });
});

describe("other headers", () => {
  it("keep answers from being guessed at, framed or traced", async () => {
    const { headers } = await request(test.app).get("/api/health").expect(200);
    expect(headers).toMatchObject({
      "x-content-type-options": "nosniff",
      "x-frame-options": "DENY",
      "referrer-policy": "same-origin",
    });
    expect(headers["x-powered-by"]).toBeUndefined();
    expect(headers["access-control-allow-origin"]).toBeUndefined();
  });

  it("ask for https only where the installation has it", async () => {
    const plain = await request(test.app).get("/api/health");
    expect(plain.headers["strict-transport-security"]).toBeUndefined();
    const secure = await request(appWith({ SECURE_COOKIES: true })).get("/api/health");
    expect(secure.headers["strict-transport-security"]).toMatch(/^max-age=31536000/);
  });

  it("keep what one person read out of caches", async () => {
    for (const path of ["/api/health", "/api/chain", "/api/nothing"]) {
      expect((await request(test.app).get(path)).headers["cache-control"], path).toBe("no-store");
    }
  });

  it("name each request, so that it can be found in the log", async () => {
    const first = await request(test.app).get("/api/health");
    const second = await request(test.app).get("/api/health");
    expect(first.headers["x-request-id"]).toMatch(/^[0-9a-f-]{36}$/);
    expect(second.headers["x-request-id"]).not.toBe(first.headers["x-request-id"]);
  });
});

describe("a request that changes something", () => {
  const body = { name: "Larkmoor" };
  /** Whether the origin was what stopped it: whoever is let through is asked to sign in next. */
  async function outcome(headers: Record<string, string>, app = test.app): Promise<"let through" | "refused"> {
    const response = await request(app).put("/api/chain").set(headers).send(body);
    if (response.status === 401) return "let through";
    expectProblem(response, 403, "foreign-origin");
    return "refused";
  }

  it("is let through from a script that sends no such headers, and from our own pages", async () => {
    expect(await outcome({})).toBe("let through");
    expect(await outcome({ Host: "shelf.chain.example", Origin: "https://shelf.chain.example" })).toBe("let through");
    expect(await outcome({ Host: "shelf.chain.example:443", Origin: "https://shelf.chain.example" })).toBe(
      "let through",
    );
    expect(await outcome({ Host: "127.0.0.1:4310", Origin: "http://127.0.0.1:4310" })).toBe("let through");
    expect(await outcome({ "Sec-Fetch-Site": "same-origin" })).toBe("let through");
    expect(await outcome({ "Sec-Fetch-Site": "none" })).toBe("let through");
  });

  it("is refused from other sites, neighbours and pages that hide where they are from", async () => {
    const Host = "shelf.chain.example";
    for (const Origin of [
      "https://evil.example",
      "null",
      "https://shelf.chain.example.evil.example",
      "https://shelf.chain.example:8443",
      "https://chain.example",
      "garbage",
    ]) {
      expect(await outcome({ Host, Origin }), Origin).toBe("refused");
    }
    for (const site of ["cross-site", "same-site"])
      expect(await outcome({ "Sec-Fetch-Site": site }), site).toBe("refused");
    // The browser's own word counts before anything that a host name suggests.
    expect(await outcome({ Host, Origin: `https://${Host}`, "Sec-Fetch-Site": "cross-site" })).toBe("refused");
  });

  it("is refused at sign-in and sign-out too", async () => {
    const Origin = "https://evil.example";
    expectProblem(
      await request(test.app).post("/api/session").set({ Origin }).send({ email: "a@chain.example", password: "x" }),
      403,
      "foreign-origin",
    );
    expectProblem(await request(test.app).delete("/api/session").set({ Origin }), 403, "foreign-origin");
  });

  it("is let through behind a proxy that hides the host, by what the proxy forwards or the address people type", async () => {
    const behind = { Host: "127.0.0.1:4310", Origin: "https://shelf.chain.example" };
    const forwarded = { ...behind, "X-Forwarded-Host": "shelf.chain.example", "X-Forwarded-Proto": "https" };
    expect(await outcome(behind, appWith({ PUBLIC_URL: "https://shelf.chain.example/" }))).toBe("let through");
    expect(await outcome(forwarded, appWith({ TRUST_PROXY: 1 }))).toBe("let through");
    expect(await outcome({ ...behind, "Sec-Fetch-Site": "same-origin" })).toBe("let through");
    // Anyone can claim a forwarded host: it counts only where a proxy is trusted.
    expect(await outcome(forwarded)).toBe("refused");
  });

  it("is let through by bearer token from anywhere, and to those who only read", async () => {
    const Origin = "https://evil.example";
    const response = await request(test.app).post("/api/tokens").set({ Origin, Authorization: bearer }).send({});
    expect(response.body.code).not.toBe("foreign-origin");
    await request(test.app).get("/api/health").set({ Origin }).expect(200);
    const bogus = await request(test.app)
      .put("/api/chain")
      .set({ Origin, Authorization: "Bearer nonsense" })
      .send(body);
    expectProblem(bogus, 401, "not-signed-in");
  });
});
