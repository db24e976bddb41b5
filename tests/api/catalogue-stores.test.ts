import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { storeSchema } from "@shared/contract/catalogue";
import { change, historyOf, loadLines } from "../support/catalogue";
import { checkedDirectly, loadCatalogueDirectly, read, salesFile, startExtractsApp, type ExtractsApp } from "../support/extracts";
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
beforeEach(() => test.services.pool.query("delete from stores where code like 'N%'"));

const shore = { code: "N1", name: "Shore Road", region: "coast", opened: "2026-03-02", closed: null };
const storeAt = async (code: string) => {
  const { body } = await read(test, "/api/stores").expect(200);
  return body.items.find((store: { code: string }) => store.code === code);
};

describe("entering a store", () => {
  it("answers the store, its address and its version, and puts it in the list", async () => {
    const response = await change(test, "post", "/api/stores", shore).expect(201);
    const store = storeSchema.parse(response.body);
    expect(store).toMatchObject(shore);
    expect(response.headers.location).toBe("/api/stores/N1");
    expect(response.headers.etag).toBe(`"${store.version}"`);
    expect(await storeAt("N1")).toEqual(store);
  });

  it("needs no days of trade", async () => {
    const { body } = await change(test, "post", "/api/stores", { code: "N2", name: " New Road ", region: "town" }).expect(201);
    expect(body).toMatchObject({ name: "New Road", opened: null, closed: null });
  });

  it("refuses a code that is taken, and names the field", async () => {
    const response = await change(test, "post", "/api/stores", { ...shore, code: "S1" });
    expectProblem(response, 409, "code-taken");
    expect(response.body.errors).toEqual([{ path: "code", message: "There is a store with the code S1 already." }]);
  });

  it.each([
    ["an empty name", { name: " " }, "name", "Fill this in."],
    ["a name on two lines", { name: "Shore\nRoad" }, "name", "Leave out tabs, line ends and other control characters."],
    ["a name beyond 120 characters", { name: "x".repeat(121) }, "name", "Use at most 120 characters."],
    ["a day that is none", { opened: "2026-02-30" }, "opened", "Give a date as YYYY-MM-DD."],
    ["a closing day before the opening", { closed: "2026-03-01" }, "closed", "The last day of trade lies before the first."],
    ["no code", { code: "" }, "code", "A code is needed."],
  ])("refuses %s", async (_what, part, path, message) => {
    const response = await change(test, "post", "/api/stores", { ...shore, ...part });
    expectProblem(response, 422, "invalid-request");
    expect(response.body.errors).toEqual([{ path, message }]);
    expect(await storeAt("N1")).toBeUndefined();
  });

  it("is for people who may write the catalogue", async () => {
    expectProblem(await request(test.app).post("/api/stores").send(shore), 401, "not-signed-in");
    expectProblem(await planner.post("/api/stores").send(shore), 403, "not-allowed");
    expectProblem(await planner.put("/api/stores/S1").send(shore), 403, "not-allowed");
    expectProblem(await planner.delete("/api/stores/S1"), 403, "not-allowed");
  });
});

describe("changing a store", () => {
  it("closes it by a day, and says in the history who did it, what was there and what is", async () => {
    await change(test, "post", "/api/stores", shore).expect(201);
    const { body } = await change(test, "put", "/api/stores/N1", { ...shore, closed: "2026-12-31" }).expect(200);
    expect(body.closed).toBe("2026-12-31");
    const [last, first] = await historyOf(test, "kind=store&code=N1");
    expect(last).toMatchObject({
      what: "store", change: "changed", code: "N1", byToken: true, file: null, person: { id: test.dataAdminId, name: "Test Person" },
      before: { name: "Shore Road", region: "coast", opened: "2026-03-02", closed: null },
      after: { name: "Shore Road", region: "coast", opened: "2026-03-02", closed: "2026-12-31" },
    });
    expect(first).toMatchObject({ change: "added", before: null });
  });

  it("leaves no trace where it changes nothing", async () => {
    await change(test, "post", "/api/stores", { ...shore, code: "N3" }).expect(201);
    const before = (await historyOf(test, "kind=store&code=N3")).length;
    await change(test, "put", "/api/stores/N3", shore).expect(200);
    expect(await historyOf(test, "kind=store&code=N3")).toHaveLength(before);
  });

  it("is refused over a change that its author has not seen, which the refusal names", async () => {
    const { body: seen } = await change(test, "post", "/api/stores", shore).expect(201);
    await change(test, "put", "/api/stores/N1", { ...shore, name: "Shore Street" }, { "If-Match": `"${seen.version}"` }).expect(200);
    const late = await change(test, "put", "/api/stores/N1", { ...shore, region: "town" }, { "If-Match": `"${seen.version}"` });
    expectProblem(late, 412, "changed-meanwhile");
    expect(late.body.detail).toMatch(/^Test Person changed store N1 at 20.*, after you had read it\. Nothing of yours was stored: read it again, then repeat your change\.$/);
    expect(await storeAt("N1")).toMatchObject({ name: "Shore Street", region: "coast" });
    expectProblem(await change(test, "delete", "/api/stores/N1", undefined, { "If-Match": `"${seen.version}"` }), 412, "changed-meanwhile");
  });

  it("of two at the same moment lets one through", async () => {
    const { body: seen } = await change(test, "post", "/api/stores", shore).expect(201);
    const answers = await Promise.all(["One", "Two", "Three"].map((name) =>
      change(test, "put", "/api/stores/N1", { ...shore, name }, { "If-Match": `"${seen.version}"` })));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 412, 412]);
  });

  it("answers 404 where there is no such store", async () => {
    expectProblem(await change(test, "put", "/api/stores/N9", shore), 404, "not-found");
    expectProblem(await change(test, "delete", "/api/stores/N9"), 404, "not-found");
  });
});

describe("removing a store", () => {
  it("takes away one that nothing refers to", async () => {
    await change(test, "post", "/api/stores", shore).expect(201);
    await change(test, "delete", "/api/stores/N1").expect(204);
    expect(await storeAt("N1")).toBeUndefined();
    expect((await historyOf(test, "kind=store&code=N1"))[0]).toMatchObject({ change: "removed", after: null });
  });

  it("is refused where sales, a waiting file, listings or temperatures name it", async () => {
    const refusal = async (says: string) => {
      const response = await change(test, "delete", "/api/stores/S1");
      expectProblem(response, 409, "in-use");
      expect(response.body.detail).toBe(`S1 cannot be removed: ${says}. Give it a last day of trade instead.`);
    };
    await loadLines(test, "temperatures", "week,store,temperature_c", "2026-05-04,S1,12");
    await refusal("it has temperatures of its own");
    await loadLines(test, "listings", "product,store,first_day", "P1,S1,2026-01-05");
    await refusal("products are listed in it");
    await test.services.pool.query("delete from listings; delete from temperatures");
    const { id } = await checkedDirectly(test, { file: salesFile("2026-05-04,S1,P1,10,19.90,1.99,1.99,0,0,none") });
    await refusal("a file that names it waits to be loaded");
    await loadExtract(test.services, { extractId: id });
    await refusal("sales of it are loaded");
  });
});
