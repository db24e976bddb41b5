import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { listFunding } from "@shared/contract/catalogue-funding";
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
beforeEach(() => test.services.pool.query("delete from product_funding; delete from audit_entries where action like 'funding.%'"));

const summer = { product: "P1", firstDay: "2026-06-01", lastDay: "2026-06-28", perUnit: 0.2, lumpSum: 500 };
const path = "/api/funding/P1/2026-06-01";
const listed = async (query = "") => listFunding.response!.parse((await read(test, `/api/funding${query}`).expect(200)).body).items;
const traces = async () => (await historyOf(test, "kind=product&code=P1")).filter(({ what }) => what === "funding");

describe("a supplier's contribution", () => {
  it("is entered, changed and removed, each with its trace", async () => {
    const { body } = await change(test, "post", "/api/funding", summer).expect(201);
    expect(body).toEqual({ ...summer, version: expect.any(String) });
    const changed = await change(test, "put", path, { lastDay: "2026-06-30", perUnit: 0.25 }, { "If-Match": `"${body.version}"` }).expect(200);
    expect(await listed("?product=P1")).toEqual([changed.body]);
    expect(changed.body).toMatchObject({ perUnit: 0.25, lumpSum: 0, lastDay: "2026-06-30" });
    expectProblem(await change(test, "put", path, summer, { "If-Match": `"${body.version}"` }), 412, "changed-meanwhile");
    await change(test, "delete", path).expect(204);
    expect((await traces()).map((entry) => [entry.change, entry.before?.perUnit, entry.after?.perUnit])).toEqual([
      ["removed", 0.25, undefined], ["changed", 0.2, 0.25], ["added", undefined, 0.2],
    ]);
    expectProblem(await change(test, "delete", path), 404, "not-found");
    expectProblem(await change(test, "put", path, summer), 404, "not-found");
    expectProblem(await read(test, "/api/funding?product=X9"), 404, "not-found");
  });

  it.each([
    ["neither amount", { perUnit: 0, lumpSum: 0 }, "invalid-request", "perUnit", "Give an amount per unit, a lump sum or both."],
    ["days in the wrong order", { lastDay: "2026-05-31" }, "invalid-request", "lastDay", "The last day lies before the first."],
    ["a negative amount", { lumpSum: -5 }, "invalid-request", "lumpSum", "An amount is not negative."],
    ["an unknown product", { product: "X9" }, "unknown-product", "product", "There is no product with the code X9."],
  ])("is refused with %s", async (_what, part, code, at, message) => {
    const response = await change(test, "post", "/api/funding", { ...summer, ...part });
    expectProblem(response, 422, code);
    expect(response.body.errors).toEqual([{ path: at, message }]);
  });

  it("shares no day with another, and does not end before it begins", async () => {
    await change(test, "post", "/api/funding", summer).expect(201);
    await change(test, "post", "/api/funding", { ...summer, firstDay: "2026-07-06", lastDay: "2026-07-12" }).expect(201);
    const message = (days: string) => `P1 has funding ${days} already: two contributions cannot share a day.`;
    const over = await change(test, "post", "/api/funding", { ...summer, firstDay: "2026-06-28", lastDay: "2026-07-01" });
    expectProblem(over, 422, "overlapping-days");
    expect(over.body.errors).toEqual([{ path: "firstDay", message: message("from 2026-06-01 to 2026-06-28") }]);
    const into = await change(test, "put", path, { ...summer, lastDay: "2026-07-06" });
    expect(into.body.errors).toEqual([{ path: "lastDay", message: message("from 2026-07-06 to 2026-07-12") }]);
    const before = await change(test, "put", path, { ...summer, lastDay: "2026-05-31" });
    expect(before.body.errors).toEqual([{ path: "lastDay", message: "The last day lies before the first." }]);
  });

  it("is for people who may write the catalogue; everyone signed in reads", async () => {
    for (const [method, where] of [["post", "/api/funding"], ["put", path], ["delete", path]] as const) {
      expectProblem(await request(test.app)[method](where).send(summer), 401, "not-signed-in");
      expectProblem(await planner[method](where).send(summer), 403, "not-allowed");
    }
    expectProblem(await request(test.app).get("/api/funding"), 401, "not-signed-in");
    await planner.get("/api/funding").expect(200);
  });
});

describe("a file of funding", () => {
  const file = (...lines: string[]) => ({ kind: "funding" as const, file: ["product,first_day,last_day,per_unit,lump_sum", ...lines].join("\n") });

  it("adds and changes contributions, and leaves a trace for each", async () => {
    const first = await checkedDirectly(test, file("P1,2026-06-01,2026-06-28,0.2,", "P1,2026-07-06,2026-07-12,,500"));
    expect(await loadExtract(test.services, { extractId: first.id })).toEqual({ new: 2, changed: 0, same: 0, missing: 0 });
    const second = await checkedDirectly(test, file("P1,2026-06-01,2026-06-28,0.2,0", "P1,2026-07-06,2026-07-12,,600"));
    expect(await loadExtract(test.services, { extractId: second.id })).toEqual({ new: 0, changed: 1, same: 1, missing: 0 });
    expect((await listed()).map(({ firstDay, perUnit, lumpSum }) => [firstDay, perUnit, lumpSum])).toEqual([["2026-06-01", 0.2, 0], ["2026-07-06", 0, 600]]);
    expect((await traces()).map(({ change: how, file: by }) => [how, by?.id])).toEqual([["changed", second.id], ["added", first.id], ["added", first.id]]);
  });

  it("has errors where nothing is given, days overlap or the product is unknown", async () => {
    const { id } = await checkedDirectly(test, file("P1,2026-06-01,2026-06-28,,", "P2,2026-06-01,2026-06-28,1,", "P2,2026-06-28,2026-07-28,1,", "X9,2026-06-01,2026-06-28,1,", "P1,2026-08-01,2026-08-02,1,"));
    const { body } = await read(test, `/api/extracts/${id}/issues`);
    expect(body.items.map(({ line, column, rule }: Record<string, unknown>) => [line, column, rule])).toEqual([
      [2, "per_unit", "no-contribution"], [3, "first_day", "shared-days"], [4, "first_day", "shared-days"], [5, "product", "unknown-product"],
    ]);
  });
});
