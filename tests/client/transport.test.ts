import { QueryClient } from "@tanstack/react-query";
import { afterEach, describe, expect, it, vi } from "vitest";
import type { Session } from "@shared/contract/accounts";
import { getChain } from "@shared/contract/chain";
import { getExtract, listExtracts } from "@shared/contract/extracts";
import { listStores } from "@shared/contract/catalogue";
import { call, endpointAddress } from "@/lib/api-client";
import { ApiError } from "@/lib/api-error";
import { paths, safeReturn } from "@/lib/paths";
import { createQueryClient, shouldRetry } from "@/lib/query-client";
import { initialsOf, sessionQuery } from "@/lib/session";
import { answerRequests, refusal } from "./support/answer";

afterEach(() => vi.unstubAllGlobals());

const failureOf = async (promise: Promise<unknown>): Promise<ApiError> => {
  try {
    await promise;
  } catch (error) {
    if (error instanceof ApiError) return error;
    throw error;
  }
  throw new Error("It did not fail.");
};

describe("a request", () => {
  it("fills its address from the contract, escaped", () => {
    expect(endpointAddress(getExtract, { params: { id: "a/b" } })).toBe("/api/extracts/a%2Fb");
    expect(endpointAddress(listExtracts, { query: { limit: 50, cursor: undefined } })).toBe("/api/extracts?limit=50");
  });

  it("gives what the contract says", async () => {
    answerRequests(() => ({
      status: 200,
      body: { items: [{ code: "S01", name: "Ashgill", region: "coast", opened: null, closed: null, version: "v1" }] },
    }));
    expect((await call(listStores, {})).items[0].name).toBe("Ashgill");
  });

  it("turns problem details into a typed error with everything they say", async () => {
    answerRequests(() =>
      refusal(422, "The name is missing.", {
        code: "invalid-request",
        errors: [{ path: "name", message: "Give a name." }],
      }),
    );
    const error = await failureOf(call(getChain, {}));
    expect(error).toMatchObject({
      status: 422,
      code: "invalid-request",
      detail: "The name is missing.",
      requestId: "req-1",
      errors: [{ path: "name", message: "Give a name." }],
    });
  });

  it("has a sentence even for a refusal that is no problem details", async () => {
    answerRequests(() => ({ status: 502, body: "<html>Bad gateway</html>", headers: { "x-request-id": "req-9" } }));
    const error = await failureOf(call(getChain, {}));
    expect(error).toMatchObject({ status: 502, code: "http-502", requestId: "req-9" });
    expect(error.detail).toMatch(/^Something went wrong/);
  });

  it("says that the server did not answer, and how long it asks to wait", async () => {
    answerRequests(() => "no answer");
    expect(await failureOf(call(getChain, {}))).toMatchObject({ status: 0, code: "unreachable" });
    answerRequests(() => ({ ...refusal(429, "Too many."), headers: { "retry-after": "30" } }));
    expect((await failureOf(call(getChain, {}))).retryAfterSeconds).toBe(30);
  });

  it("notices an answer that breaks the contract where it enters", async () => {
    answerRequests(() => ({ status: 200, body: { items: [{ code: "S01" }] } }));
    const error = await failureOf(call(listStores, {}));
    expect(error.code).toBe("unexpected-answer");
    expect(error.errors[0].path).toBe("items.0.name");
  });

  it("is tried again where the server is out of reach or broken, never where it refused", () => {
    const failed = (status: number) => new ApiError({ status, code: "x", detail: "x" });
    expect([0, 502, 503].map((status) => shouldRetry(0, failed(status)))).toEqual([true, true, true]);
    expect([400, 401, 403, 404, 409, 422, 500].some((status) => shouldRetry(0, failed(status)))).toBe(false);
    expect(shouldRetry(2, failed(503))).toBe(false);
  });
});

describe("the session", () => {
  it("of nobody is an answer, not a failure", async () => {
    answerRequests(() => refusal(401, "Sign in first."));
    expect(await new QueryClient().fetchQuery(sessionQuery())).toBeNull();
  });

  it("is forgotten by whichever request finds that it has run out", async () => {
    const client = createQueryClient();
    const key = sessionQuery().queryKey;
    const person = {
      id: "0b7e3a44-3b1b-4a8e-9a0a-000000000001",
      email: "a@b.example",
      name: "Ada",
      roles: [],
      categories: [],
      mustChangePassword: false,
    };
    const session: Session = { person, permissions: [], by: "session" };
    client.setQueryData(key, session);
    answerRequests(() => refusal(401, "Sign in again."));
    await client.prefetchQuery({ queryKey: ["stores"], queryFn: () => call(listStores, {}) });
    expect(client.getQueryData(key)).toBeNull();
  });

  it("gives a person two letters", () => {
    expect([initialsOf("Ingrid Kale"), initialsOf("Oda van der Berg"), initialsOf("Ada")]).toEqual(["IK", "OB", "AD"]);
  });
});

describe("addresses", () => {
  it("hold what a colleague needs to see the same", () => {
    expect(paths.stores.href({ product: "P01", driver: "price", store: "S 1" })).toBe(
      "/stores?product=P01&driver=price&store=S+1",
    );
    expect(paths.signIn.href("/stores?product=P01")).toBe("/sign-in?returnTo=%2Fstores%3Fproduct%3DP01");
  });

  it("lead back into this site only", () => {
    expect(safeReturn("/stores?product=P01")).toBe("/stores?product=P01");
    expect(["//evil.example", "https://evil.example", "/\\evil.example", "", null].map(safeReturn)).toEqual([
      "/",
      "/",
      "/",
      "/",
      "/",
    ]);
  });
});
