import { randomUUID } from "node:crypto";
import request from "supertest";
import { gzipSync } from "node:zlib";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import type { Extract } from "@shared/contract/extracts";
import type { LayoutPreview, SavedLayout } from "@shared/contract/saved-layouts";
import { missingMeansIn, weeksWhereMissingMeansZero } from "../../server/features/extracts";
import { act, afterJob, checked, loadCatalogue, loaded, read, salesFile, startExtractsApp, upload, type ExtractsApp } from "../support/extracts";
import { german, germanFile, layoutsIn } from "../support/layouts";
import { bearerOf } from "../support/people";
import { expectProblem } from "../support/problems";

let test: ExtractsApp;
let planner: string;
beforeAll(async () => {
  test = await startExtractsApp();
  planner = await bearerOf(test.app, test.services, ["planner"]);
  await loadCatalogue(test);
});
afterAll(() => test.stop());

const { put, layoutOf, audited, confirmed, load, savedAs, germanLayout } = layoutsIn(() => test);

describe("a saved layout", () => {
  it("is kept as a file is confirmed, and recognises the next week's file in whatever order its columns are", async () => {
    const names = "Wk;Shop;Item;Qty;Takings;Base price";
    const first = await checked(test, { file: `${names}\n2026-05-11;S1;P1;1,5;2,69;1,79\n` });
    const saved = await confirmed(first, { saveAs: "Shop tills", changes: { missingMeans: "zero" } });
    expect(saved.layout).toEqual({ origin: "saved", id: expect.any(String), name: "Shop tills", isConfirmed: true });
    expect((await audited("layout.saved")).at(-1)?.detail).toMatchObject({ name: "Shop tills", kind: "sales" });
    const next = await checked(test, { file: `Item;${names.replace("Item;", "")}\nP1;2026-05-18;S1;1,5;2,69;1,79\n` });
    expect(next).toMatchObject({ state: "checked", rows: { usable: 1 }, layout: { origin: "saved", name: "Shop tills", isConfirmed: true }, may: { load: true } });
    expect((await layoutOf(next)).preview.rows[0]?.values.slice().sort()).toEqual(["1.5", "1.79", "2.69", "2026-05-18", "P1", "S1"]);
    expect(await load(next)).toMatchObject({ state: "loaded" });
    await vi.waitFor(async () => {
      const { rows } = await test.services.pool.query("select 1 from extracts where id = $1 and not coverage_pending", [next.id]);
      expect(rows).toHaveLength(1);
    }, { timeout: 15_000, interval: 100 });
    const em = test.services.orm.em.fork();
    const [{ id: storeId }] = (await test.services.pool.query<{ id: number }>("select id from stores where code = 'S1'")).rows;
    expect(await weeksWhereMissingMeansZero(em, { storeIds: [storeId], first: "2026-05-01", last: "2026-06-30" })).toEqual([{ storeId, week: "2026-05-18" }]);
    expect([await missingMeansIn(em, { storeId, week: "2026-05-18" }), await missingMeansIn(em, { storeId, week: "2026-05-25" })]).toEqual(["zero", "unknown"]);
    const { body } = await read(test, "/api/layouts?kind=sales").expect(200);
    expect(body.items.find(({ name }: SavedLayout) => name === "Shop tills")).toMatchObject({ lastUsedAt: expect.any(String), updatedBy: { name: "Test Person" } });
  });

  it("is not taken for a file in which a column has another name", async () => {
    const layout = await germanLayout();
    await savedAs("Renamed tills", { ...layout, theirColumns: layout.theirColumns.map((name) => (name === "Artikel" ? "Ware" : name)), mapping: { ...layout.mapping, product: { from: "name", name: "Ware" } } });
    const extract = await checked(test, { file: germanFile });
    expect(extract.layout?.origin).toBe("proposed");
  });

  it("is asked for by name at upload, and refused with the known names where there is none", async () => {
    const layout = await germanLayout();
    await savedAs("Night tills", { ...layout, weekDay: "first" });
    const file = german("01.06.2026;S1;P1;1,5;2,69;1,79", "08.06.2026;S1;P1;1,5;2,69;1,79");
    const asked = await afterJob(test, await upload(test, { file }).field("layout", "Night tills").expect(202));
    expect(asked).toMatchObject({ state: "checked", firstWeek: "2026-06-01", layout: { origin: "saved", name: "Night tills", isConfirmed: true } });
    const refused = await upload(test, { file }).field("layout", "Day tills");
    expectProblem(refused, 422, "unknown-layout");
    expect(refused.body.detail).toMatch(/There is no saved layout "Day tills"\. For sales files there are .*"Night tills"/);
    const other = await upload(test, { kind: "stores", file: "store,name,region\nS9,x,y" }).field("layout", "Night tills");
    expect(other.body.detail).toBe('The layout "Night tills" is for a sales file. None is saved for stores files yet: send the file without a layout.');
  });

  it("that a file does not fit says which columns that lacks", async () => {
    await savedAs("Other tills", { ...(await germanLayout()), theirColumns: ["Woche bis", "Filiale", "Artikel", "Menge", "Umsatz", "Preis"], mapping: { ...(await germanLayout()).mapping, regular_price: { from: "name", name: "Preis" } } });
    const extract = await afterJob(test, await upload(test, { file: germanFile }).field("layout", "Other tills").expect(202));
    expect(extract).toMatchObject({ state: "unusable", failure: { code: "layout-does-not-fit", detail: expect.stringMatching(/lacks columns that its layout reads: Preis\./) } });
    const { preview } = await layoutOf(extract);
    expect(preview.warnings.map(({ code }) => code)).toContain("columns-not-in-file");
  });

  it("is changed and forgotten without touching the files it has read", async () => {
    const layout = await germanLayout();
    const { id } = await savedAs("Lent tills", { ...layout, weekDay: "first" });
    const extract = await afterJob(test, await upload(test, { file: german("01.06.2026;S1;P1;1,5;2,69;1,79") }).field("layout", "Lent tills").expect(202));
    const { body } = await put(`/api/layouts/${id}`, { name: "Lent tills 2", layout }).expect(200);
    expect(body).toMatchObject({ id, name: "Lent tills 2", layout: { weekDay: "last" } });
    expect((await audited("layout.changed")).at(-1)?.detail).toMatchObject({ before: { name: "Lent tills", layout: { weekDay: "first" } }, after: { layout: { weekDay: "last" } } });
    await request(test.app).delete(`/api/layouts/${id}`).set("Authorization", test.dataAdmin).expect(204);
    expect((await audited("layout.deleted")).at(-1)).toMatchObject({ subject_id: id, detail: { name: "Lent tills 2" } });
    const again = await afterJob(test, await act(test, `/api/extracts/${extract.id}/check`).expect(202));
    expect(again).toMatchObject({ state: "checked", firstWeek: "2026-06-01", layout: { origin: "saved", id: null, name: null, isConfirmed: true } });
  });

  it("has a name of its own", async () => {
    const layout = await germanLayout();
    const { id } = await savedAs("Taken", layout);
    await savedAs("Free", layout);
    expectProblem(await act(test, "/api/layouts").send({ name: "Taken", layout }), 409, "name-taken");
    expectProblem(await put(`/api/layouts/${id}`, { name: "Free", layout }), 409, "name-taken");
    await put(`/api/layouts/${id}`, { name: "Taken", layout }).expect(200);
    const stores = await checked(test, { kind: "stores", file: "store;name;region\nS1;Harbour Street;coast\n" });
    expectProblem(await put(`/api/extracts/${stores.id}/layout`, { layout: (await layoutOf(stores)).layout, saveAs: "Taken" }), 409, "name-taken");
  });
});

describe("another layout can be tried", () => {
  it("on a file's first rows, and nothing is kept", async () => {
    const extract = await checked(test, { file: germanFile });
    const { layout } = await layoutOf(extract);
    const tried = { ...layout, weekDay: "first", mapping: { ...layout.mapping, units: { from: "value", value: "7" } } };
    const { body } = await act(test, `/api/extracts/${extract.id}/layout/preview`).send({ layout: tried }).expect(200);
    const { rows, columns } = body as LayoutPreview;
    expect(rows[0]?.values[columns.indexOf("units")]).toBe("7");
    expect(rows[0]?.problems).toEqual([{ column: "week", value: "31.05.2026", reason: expect.stringMatching(/is a Sunday, but weeks begin on Monday/) }]);
    expect((await layoutOf(extract)).layout).toEqual(layout);
  });

  it("with another separator, which gives other columns with proposals of their own", async () => {
    const extract = await checked(test, { file: salesFile("2026-06-01,S1,P1,12,21.48,1.79,,0,0,none") });
    const { layout } = await layoutOf(extract);
    const { body } = await act(test, `/api/extracts/${extract.id}/layout/preview`).send({ layout: { ...layout, separator: ";", mapping: {} } }).expect(200);
    expect(body.fileColumns).toHaveLength(1);
    expect(body.missing).toHaveLength(6);
  });

  it("of a compressed file, of which no more than the beginning is read", async () => {
    const many = Array.from({ length: 60_000 }, (_, at) => `31.05.2026;S${at};P1;1.234,5;2.209,76;1,79`);
    const answer = await upload(test, { file: gzipSync(german(...many), { level: 1 }), name: "many.csv.gz" }).expect(202);
    const { id } = await afterJob(test, answer);
    const [get, head] = [vi.spyOn(test.services.files, "get"), vi.spyOn(test.services.files, "head")];
    const { preview } = await layoutOf({ id });
    expect(preview.rows).toHaveLength(20);
    expect(get).not.toHaveBeenCalled();
    const bytes = await head.mock.results[0]?.value as Buffer;
    expect(bytes.length).toBeLessThan(100_000);
    vi.restoreAllMocks();
  });
});

describe("routes of layouts", () => {
  let extract: Extract;
  let saved: SavedLayout;
  const paths = () => ({ layouts: "/api/layouts", one: `/api/layouts/${saved.id}`, ofExtract: `/api/extracts/${extract.id}/layout`, preview: `/api/extracts/${extract.id}/layout/preview` });
  const calls: [string, () => request.Test, isRead?: boolean][] = [
    ["list them", () => request(test.app).get(paths().layouts), true],
    ["save one", () => request(test.app).post(paths().layouts).send({ name: "New", layout: saved.layout })],
    ["change one", () => request(test.app).put(paths().one).send({ name: "Routes", layout: saved.layout })],
    ["forget one", () => request(test.app).delete(paths().one)],
    ["read an extract's", () => request(test.app).get(paths().ofExtract), true],
    ["try one", () => request(test.app).post(paths().preview).send({ layout: saved.layout })],
    ["choose one", () => request(test.app).put(paths().ofExtract).send({ layout: saved.layout })],
  ];

  beforeAll(async () => {
    extract = await checked(test, { file: germanFile });
    saved = await savedAs("Routes", (await layoutOf(extract)).layout);
  });

  it.each(calls)("that %s need a sign-in", async (_, call) => expectProblem(await call(), 401, "not-signed-in"));

  it.each(calls)("that %s are for those who may", async (_, call, isRead = false) => {
    const answer = await call().set("Authorization", planner);
    if (isRead) expect(answer.status).toBe(200);
    else expectProblem(answer, 403, "not-allowed");
  });

  it("answer 404 for what does not exist", async () => {
    const { layout } = saved;
    for (const path of ["/layout", "/layout/preview"]) {
      const call = path === "/layout" ? put(`/api/extracts/${randomUUID()}${path}`, { layout }) : act(test, `/api/extracts/${randomUUID()}${path}`).send({ layout });
      expectProblem(await call, 404, "not-found");
    }
    expectProblem(await read(test, `/api/extracts/${randomUUID()}/layout`), 404, "not-found");
    expectProblem(await put(`/api/layouts/${randomUUID()}`, { name: "x", layout }), 404, "not-found");
    expectProblem(await request(test.app).delete(`/api/layouts/${randomUUID()}`).set("Authorization", test.dataAdmin), 404, "not-found");
  });

  it("answer 422 for what no layout can be", async () => {
    const { layout } = saved;
    const wrong = { ...layout, thousands: layout.decimal };
    for (const call of [
      act(test, "/api/layouts").send({ name: "x", layout: wrong }), act(test, "/api/layouts").send({ name: " ", layout }), put(paths().one, { name: "Routes", layout: wrong }),
      put(paths().ofExtract, { layout: wrong }), act(test, paths().preview).send({ layout: wrong }), read(test, "/api/layouts?kind=people"),
    ]) expectProblem(await call, 422, "invalid-request");
    const ofStores = { ...layout, kind: "stores", mapping: {} };
    expectProblem(await act(test, paths().preview).send({ layout: ofStores }), 422, "layout-of-another-kind");
    expectProblem(await put(paths().ofExtract, { layout: ofStores }), 422, "layout-of-another-kind");
    expectProblem(await act(test, "/api/layouts").send({ name: "x", layout: { ...layout, mapping: {} } }), 422, "layout-incomplete");
  });

  it("refuse another layout once the file is loaded", async () => {
    const own = await loaded(test, { file: salesFile("2026-03-02,S4,P2,12,29.88,2.49,,0,0,none") });
    const { layout } = await layoutOf(own);
    expectProblem(await put(`/api/extracts/${own.id}/layout`, { layout }), 409, "layout-fixed");
  });
});
