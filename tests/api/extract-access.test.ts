import { randomUUID } from "node:crypto";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { checkExtractJob } from "../../server/features/extracts/extracts.jobs";
import { act, checkedDirectly, loadCatalogueDirectly, read, salesFile, startExtractsApp, upload, type ExtractsApp } from "../support/extracts";
import { bearerOf } from "../support/people";

let test: ExtractsApp;
let planner: string;
let id: string;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  planner = await bearerOf(test.app, test.services, ["planner"]);
  await loadCatalogueDirectly(test);
  ({ id } = await checkedDirectly(test, { name: "=week 23.csv", file: salesFile("2026-06-01,S1,P1,1,1.79,1.79,,0,0,none") }));
});
afterAll(() => test.stop());

const readable = ["", "/issues", "/changes", "/original"];
const doable = ["check", "load", "withdraw"];

describe("extracts", () => {
  it.each(readable)("of /api/extracts/:id%s are read by everyone signed in, and nobody else", async (path) => {
    await request(test.app).get(`/api/extracts/${id}${path}`).expect(401);
    await request(test.app).get(`/api/extracts/${id}${path}`).set("Authorization", planner).expect(200);
  });

  it.each(readable)("that do not exist are answered 404 at /api/extracts/:id%s", async (path) => {
    const { body } = await read(test, `/api/extracts/${randomUUID()}${path}`).expect(404);
    expect(body.code).toBe("not-found");
    await read(test, `/api/extracts/week-23${path}`).expect(404);
  });

  it.each(doable)("are changed by %s by data admins only", async (what) => {
    await request(test.app).post(`/api/extracts/${id}/${what}`).expect(401);
    const { body } = await request(test.app).post(`/api/extracts/${id}/${what}`).set("Authorization", planner).expect(403);
    expect(body.code).toBe("not-allowed");
    await act(test, `/api/extracts/${randomUUID()}/${what}`).expect(404);
  });

  it("tell each reader what that reader may do", async () => {
    const { body: forAdmin } = await read(test, `/api/extracts/${id}`).expect(200);
    const { body: forPlanner } = await request(test.app).get(`/api/extracts/${id}`).set("Authorization", planner).expect(200);
    expect(forAdmin.may).toEqual({ check: true, load: true, withdraw: false });
    expect(forPlanner.may).toEqual({ check: false, load: false, withdraw: false });
  });

  it("are listed newest first, in pages", async () => {
    const { body: all } = await read(test, "/api/extracts").expect(200);
    expect(all.items.map(({ kind }: { kind: string }) => kind).sort()).toEqual(["products", "sales", "stores"]);
    const seen: string[] = [];
    let cursor: string | null = "";
    while (cursor !== null) {
      const page: { body: { items: { id: string }[]; nextCursor: string | null } } = await read(test, `/api/extracts?limit=1${cursor && `&cursor=${cursor}`}`).expect(200);
      seen.push(...page.body.items.map((item) => item.id));
      cursor = page.body.nextCursor;
    }
    expect(seen).toEqual(all.items.map((item: { id: string }) => item.id));
    await read(test, "/api/extracts?limit=0").expect(422);
    await read(test, "/api/extracts?cursor=e30").expect(422);
  });

  it("say that changes are not known before a check has found a usable row", async () => {
    const empty = await checkedDirectly(test, { file: "week,store\n" });
    expect((await read(test, `/api/extracts/${empty.id}/changes`).expect(409)).body.code).toBe("not-checked");
  });

  it("whose check was cancelled before it began can be checked again", async () => {
    const { body } = await upload(test, { file: salesFile("2026-06-01,S1,P1,1,1.79,1.79,,0,0,none") }).expect(202);
    const error = { code: "cancelled", detail: "Cancelled on request." };
    await checkExtractJob.onGivenUp?.({ payload: { extractId: body.id }, services: test.services, error });
    const { body: extract } = await read(test, `/api/extracts/${body.id}`).expect(200);
    expect(extract).toMatchObject({ state: "received", failure: error, may: { check: true } });
  });
});
