import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { eventSchema, listEvents } from "@shared/contract/catalogue-events";
import { change, historyOf } from "../support/catalogue";
import { loadCatalogueDirectly, read, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { signedInAs } from "../support/people";
import { expectProblem } from "../support/problems";

let test: ExtractsApp;
let planner: Awaited<ReturnType<typeof signedInAs>>;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  planner = await signedInAs(test.app, test.services, ["planner"]);
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());
beforeEach(() => test.services.pool.query("delete from events; delete from audit_entries where action like 'event.%'"));

const regatta = { code: "regatta", name: "Harbour regatta", firstDay: "2026-07-17", lastDay: "2026-07-19", region: "coast" };
const entered = async (part: object = {}) => eventSchema.parse((await change(test, "post", "/api/events", { ...regatta, ...part }).expect(201)).body);
const listed = async (query = "") => listEvents.response!.parse((await read(test, `/api/events${query}`).expect(200)).body).items;

describe("an event", () => {
  it("that moves has a row a year under one code", async () => {
    const [last, next] = [await entered({ firstDay: "2025-07-18", lastDay: "2025-07-20" }), await entered()];
    expect(await listed("?code=regatta")).toEqual([last, next]);
    expect(await listed("?from=2026-01-01&to=2026-12-31")).toEqual([next]);
    expect(await listed("?from=2026-07-19&to=2026-07-19")).toEqual([next]);
    expect(await listed("?from=2026-07-20")).toEqual([]);
  });

  it("is changed and removed, each with its trace", async () => {
    const { id, version } = await entered();
    const path = `/api/events/${id}`;
    const { body } = await change(test, "put", path, { ...regatta, lastDay: "2026-07-20", region: null }, { "If-Match": `"${version}"` }).expect(200);
    expect(body).toMatchObject({ id, lastDay: "2026-07-20", region: null });
    expectProblem(await change(test, "put", path, regatta, { "If-Match": `"${version}"` }), 412, "changed-meanwhile");
    await change(test, "delete", path).expect(204);
    expectProblem(await change(test, "delete", path), 404, "not-found");
    expectProblem(await change(test, "put", path, regatta), 404, "not-found");
    expect((await historyOf(test, "kind=event&code=regatta")).map((entry) => [entry.change, entry.before?.region, entry.after?.region])).toEqual([
      ["removed", null, undefined], ["changed", "coast", null], ["added", undefined, "coast"],
    ]);
  });

  it("that goes on under another code leaves one history and begins another", async () => {
    const { id } = await entered();
    await change(test, "put", `/api/events/${id}`, { ...regatta, code: "sail-week" }).expect(200);
    expect((await historyOf(test, "kind=event&code=regatta"))[0]).toMatchObject({ change: "removed" });
    expect(await historyOf(test, "kind=event&code=sail-week")).toMatchObject([{ change: "added", after: { name: "Harbour regatta" } }]);
  });

  it.each([
    ["a region without stores", { region: "island" }, "unknown-region", "region", "No store is in the region island."],
    ["days in the wrong order", { lastDay: "2026-07-16" }, "invalid-request", "lastDay", "The last day lies before the first."],
    ["no name", { name: "" }, "invalid-request", "name", "Fill this in."],
    ["the day of another occurrence", { name: "Again" }, "already-there", "firstDay", "regatta has an occurrence from 2026-07-17 already. Change that one."],
  ])("is refused with %s", async (_what, part, code, path, message) => {
    await entered();
    const response = await change(test, "post", "/api/events", { ...regatta, ...part });
    expectProblem(response, 422, code);
    expect(response.body.errors).toEqual([{ path, message }]);
  });

  it("is not moved onto another of its occurrences", async () => {
    await entered();
    const { id } = await entered({ firstDay: "2027-07-16", lastDay: "2027-07-18" });
    expectProblem(await change(test, "put", `/api/events/${id}`, regatta), 422, "already-there");
  });

  it("is for people who may write the catalogue; everyone signed in reads", async () => {
    for (const [method, path] of [["post", "/api/events"], ["put", "/api/events/1"], ["delete", "/api/events/1"]] as const) {
      expectProblem(await request(test.app)[method](path).send(regatta), 401, "not-signed-in");
      expectProblem(await planner[method](path).send(regatta), 403, "not-allowed");
    }
    expectProblem(await request(test.app).get("/api/events"), 401, "not-signed-in");
    expectProblem(await planner.get("/api/events?from=spring"), 422, "invalid-request");
    expectProblem(await change(test, "put", "/api/events/regatta", regatta), 404, "not-found");
    await planner.get("/api/events").expect(200);
  });
});
