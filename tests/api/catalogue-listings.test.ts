import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { listListings, type Listing } from "@shared/contract/catalogue-listings";
import { change, historyOf } from "../support/catalogue";
import { checkedDirectly, loadCatalogueDirectly, read, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { loadExtract } from "../../server/features/extracts";
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
beforeEach(() => test.services.pool.query("delete from listings; delete from audit_entries where action like 'listing.%'"));

const listed = async (query = "") => listListings.response!.parse((await read(test, `/api/listings${query}`).expect(200)).body);
const short = ({ product, store, firstDay, lastDay }: Listing) => `${product} ${store} ${firstDay} ${lastDay ?? "on"}`;
const enter = (part: object = {}) => change(test, "post", "/api/listings", { product: "P1", stores: ["S1", "S2"], firstDay: "2026-01-05", lastDay: "2026-03-01", ...part });

describe("listing a product", () => {
  it("in several stores enters each, with a trace each in the product's history", async () => {
    expect((await enter({ stores: ["S1", "S2", "S1"] }).expect(201)).body).toEqual({ entered: 2 });
    expect((await listed()).items.map(short)).toEqual(["P1 S1 2026-01-05 2026-03-01", "P1 S2 2026-01-05 2026-03-01"]);
    const history = (await historyOf(test, "kind=product&code=P1")).filter(({ what }) => what === "listing");
    expect(history.map(({ change: how, before, after }) => [how, before, after])).toEqual([
      ["added", null, { store: "S2", firstDay: "2026-01-05", lastDay: "2026-03-01" }],
      ["added", null, { store: "S1", firstDay: "2026-01-05", lastDay: "2026-03-01" }],
    ]);
  });

  it("is refused in all of them where the days overlap in one, in words and at the field", async () => {
    await enter({ stores: ["S2"] }).expect(201);
    const response = await enter({ firstDay: "2026-03-01", lastDay: null });
    expectProblem(response, 422, "overlapping-days");
    const message = "S2 lists P1 from 2026-01-05 to 2026-03-01 already: two listings cannot share a day.";
    expect(response.body).toMatchObject({ detail: message, errors: [{ path: "stores.1", message }] });
    expect((await listed()).items).toHaveLength(1);
    await enter({ firstDay: "2026-03-02", lastDay: null }).expect(201);
  });

  it.each([
    ["an unknown product", { product: "X9" }, "unknown-product", "product", "There is no product with the code X9."],
    ["an unknown store", { stores: ["S1", "X1"] }, "unknown-store", "stores.1", "There is no store with the code X1."],
    ["no store", { stores: [] }, "invalid-request", "stores", "Choose at least one store."],
    ["days in the wrong order", { lastDay: "2026-01-04" }, "invalid-request", "lastDay", "The last day lies before the first."],
  ])("refuses %s", async (_what, part, code, path, message) => {
    const response = await enter(part);
    expectProblem(response, 422, code);
    expect(response.body.errors).toEqual([{ path, message }]);
  });

  it("is for people who may write the catalogue; everyone signed in reads", async () => {
    for (const [method, path] of [["post", "/api/listings"], ["put", "/api/listings/P1/S1/2026-01-05"], ["delete", "/api/listings/P1/S1/2026-01-05"]] as const) {
      expectProblem(await request(test.app)[method](path).send({ lastDay: null }), 401, "not-signed-in");
      expectProblem(await planner[method](path).send({ lastDay: null }), 403, "not-allowed");
    }
    expectProblem(await request(test.app).get("/api/listings"), 401, "not-signed-in");
    await planner.get("/api/listings").expect(200);
  });
});

describe("one listing", () => {
  const path = "/api/listings/P1/S1/2026-01-05";

  it("is entered, ended, and removed", async () => {
    const { body } = await change(test, "put", path, { lastDay: null }, { "If-None-Match": "*" }).expect(200);
    expect(body).toMatchObject({ product: "P1", store: "S1", firstDay: "2026-01-05", lastDay: null });
    const ended = await change(test, "put", path, { lastDay: "2026-05-31" }, { "If-Match": `"${body.version}"` }).expect(200);
    expect((await listed()).items).toEqual([ended.body]);
    expectProblem(await change(test, "put", path, { lastDay: null }, { "If-Match": `"${body.version}"` }), 412, "changed-meanwhile");
    await change(test, "delete", path).expect(204);
    expectProblem(await change(test, "delete", path), 404, "not-found");
    const history = (await historyOf(test, "kind=product&code=P1")).filter(({ what }) => what === "listing");
    expect(history.map((entry) => [entry.change, entry.before?.lastDay, entry.after?.lastDay])).toEqual([
      ["removed", "2026-05-31", undefined], ["changed", null, "2026-05-31"], ["added", undefined, null],
    ]);
  });

  it("cannot run into the next, nor end before it begins", async () => {
    await enter({ stores: ["S1"], firstDay: "2026-06-01", lastDay: null }).expect(201);
    const into = await change(test, "put", path, { lastDay: null });
    expect(into.body.errors).toEqual([{ path: "lastDay", message: "S1 lists P1 from 2026-06-01 on already: two listings cannot share a day." }]);
    const before = await change(test, "put", path, { lastDay: "2026-01-04" });
    expect(before.body.errors).toEqual([{ path: "lastDay", message: "The last day lies before the first." }]);
    await change(test, "put", path, { lastDay: "2026-05-31" }).expect(200);
  });

  it("answers 404 for a product, store or day that is none", async () => {
    for (const wrong of ["/api/listings/X9/S1/2026-01-05", "/api/listings/P1/X9/2026-01-05", "/api/listings/P1/S1/today"]) {
      expectProblem(await change(test, "put", wrong, { lastDay: null }), 404, "not-found");
    }
    expectProblem(await change(test, "put", path, { lastDay: "soon" }), 422, "invalid-request");
  });
});

describe("the list of listings", () => {
  it("pages by product, store and day, and filters by either", async () => {
    await enter({ stores: ["S1", "S2", "S3"] }).expect(201);
    await enter({ product: "P2", stores: ["S2"] }).expect(201);
    const first = await listed("?limit=3");
    expect(first.items.map(short)).toEqual(["P1 S1 2026-01-05 2026-03-01", "P1 S2 2026-01-05 2026-03-01", "P1 S3 2026-01-05 2026-03-01"]);
    const second = await listed(`?limit=3&cursor=${first.nextCursor}`);
    expect({ items: second.items.map(short), nextCursor: second.nextCursor }).toEqual({ items: ["P2 S2 2026-01-05 2026-03-01"], nextCursor: null });
    expect((await listed("?product=P2")).items).toHaveLength(1);
    expect((await listed("?store=S2")).items.map(short)).toEqual(["P1 S2 2026-01-05 2026-03-01", "P2 S2 2026-01-05 2026-03-01"]);
    expectProblem(await read(test, "/api/listings?cursor=nonsense"), 422, "invalid-cursor");
  });
});

describe("a file of listings", () => {
  const header = "product,store,first_day,last_day";
  const file = (...lines: string[]) => ({ kind: "listings" as const, file: [header, ...lines].join("\n") });
  const issuesOf = async (id: string) => (await read(test, `/api/extracts/${id}/issues`)).body.items
    .map(({ line, column, value, rule, reason }: Record<string, unknown>) => [line, column, value, rule, reason]);

  it("names products by code or GTIN, leaves a trace for each row that changes, and none for the others", async () => {
    const { id } = await checkedDirectly(test, file("P1,S1,2026-01-05,", "2000000000015,S2,2026-01-05,2026-05-31", "P2,S1,2026-02-02,"));
    expect(await loadExtract(test.services, { extractId: id })).toEqual({ new: 3, changed: 0, same: 0, missing: 0 });
    const again = await checkedDirectly(test, file("P1,S1,2026-01-05,2026-12-31", "P1,S2,2026-01-05,2026-05-31"));
    expect(await loadExtract(test.services, { extractId: again.id })).toEqual({ new: 0, changed: 1, same: 1, missing: 0 });
    const history = await historyOf(test, "kind=product&code=P1");
    const [last] = history;
    expect(last).toMatchObject({
      what: "listing", change: "changed", byToken: false, file: { id: again.id, name: "file.csv" }, person: { id: test.dataAdminId },
      before: { store: "S1", firstDay: "2026-01-05", lastDay: null }, after: { store: "S1", firstDay: "2026-01-05", lastDay: "2026-12-31" },
    });
    expect(history.filter(({ what }) => what === "listing")).toHaveLength(3);
  });

  it("has errors where days overlap, in the file or with what is there, and where codes are unknown", async () => {
    await enter({ stores: ["S3"], firstDay: "2026-01-05", lastDay: "2026-03-01" }).expect(201);
    const { id, state } = await checkedDirectly(test, file(
      "P1,S1,2026-01-05,2026-03-01", "P1,S1,2026-03-01,", "P1,S3,2026-02-01,", "P1,S3,2026-01-05,2026-01-31", "X9,S1,2026-01-05,", "P1,X1,2026-01-05,", "P1,S2,2026-02-02,2026-02-01", "P1,S2,2026-01-05,",
    ));
    expect(state).toBe("checked");
    expect(await issuesOf(id)).toEqual([
      [2, "first_day", "2026-01-05", "shared-days", "The days overlap with others for the same, from 2026-03-01 on"],
      [3, "first_day", "2026-03-01", "shared-days", "The days overlap with others for the same, from 2026-01-05 to 2026-03-01"],
      [6, "product", "X9", "unknown-product", "There is no product with this code or GTIN"],
      [7, "store", "X1", "unknown-store", "There is no store with this code"],
      [8, "last_day", "2026-02-01", "last-before-first", "The last day lies before the first"],
    ]);
    // The listing that was there ends earlier by the file, so the next one has room.
    expect(await loadExtract(test.services, { extractId: id })).toEqual({ new: 2, changed: 1, same: 0, missing: 0 });
  });

  it("is not loaded over listings that were entered since its check", async () => {
    const { id } = await checkedDirectly(test, file("P1,S1,2026-01-05,"));
    await enter({ stores: ["S1"], firstDay: "2026-02-02", lastDay: null }).expect(201);
    await expect(loadExtract(test.services, { extractId: id })).rejects.toMatchObject({ code: "check-outdated" });
    expect((await listed()).items.map(short)).toEqual(["P1 S1 2026-02-02 on"]);
  });
});
