import { randomUUID } from "node:crypto";
import request from "supertest";
import { gzipSync } from "node:zlib";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import type { Extract, ExtractIssue } from "@shared/contract/extracts";
import type { Layout } from "@shared/contract/layouts";
import type { ExtractLayout, LayoutPreview, SavedLayout } from "@shared/contract/saved-layouts";
import { missingMeansIn, weeksWhereMissingMeansZero } from "../../server/features/extracts";
import { act, afterJob, checked, checkedDirectly, loadCatalogue, loadCatalogueDirectly, loaded, read, salesFile, startExtractsApp, storedSales, upload, type ExtractsApp } from "../support/extracts";
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

const germanNames = "Woche bis;Filiale;Artikel;Menge;Umsatz;Normalpreis";
const german = (...rows: string[]) => `${[germanNames, ...rows].join("\n")}\n`;
const germanFile = german("31.05.2026;S1;P1;1.234,5;2.209,76;1,79", "31.05.2026;S2;P1;12;21,48;1,79");

const put = (path: string, body: object) => request(test.app).put(path).set("Authorization", test.dataAdmin).send(body);
const layoutOf = async ({ id }: Pick<Extract, "id">) => (await read(test, `/api/extracts/${id}/layout`).expect(200)).body as ExtractLayout;
const issuesOf = async ({ id }: Pick<Extract, "id">) => (await read(test, `/api/extracts/${id}/issues`).expect(200)).body.items as ExtractIssue[];
const audited = async (action: string) => (await test.services.pool.query<{ detail: Record<string, unknown>; subject_id: string }>(
  "select detail, subject_id from audit_entries where action = $1 order by id", [action])).rows;

/** Has a file read by the layout proposed for it, with changes, and checked again. */
async function confirmed({ id }: Pick<Extract, "id">, { changes = {}, saveAs }: { changes?: Partial<Layout>; saveAs?: string } = {}): Promise<Extract> {
  const { layout } = await layoutOf({ id });
  return afterJob(test, await put(`/api/extracts/${id}/layout`, { layout: { ...layout, ...changes }, saveAs }).expect(202));
}

const load = async ({ id }: Pick<Extract, "id">) => afterJob(test, await act(test, `/api/extracts/${id}/load`).send({ secondLook: true }).expect(202));

async function savedAs(name: string, layout: Layout): Promise<SavedLayout> {
  const { body } = await act(test, "/api/layouts").send({ name, layout }).expect(201);
  return body as SavedLayout;
}

async function germanLayout(): Promise<Layout> {
  return (await layoutOf(await checked(test, { file: germanFile }))).layout;
}

describe("a file in our own form", () => {
  it("needs no layout, and says so", async () => {
    const extract = await checked(test, { file: salesFile("2026-06-01,S1,P1,12,21.48,1.79,,0,0,none") });
    expect(extract.layout).toEqual({ origin: "own", id: null, name: null, isConfirmed: true });
    const { layout, preview, ...how } = await layoutOf(extract);
    expect(how).toEqual({ origin: "own", saved: null, isConfirmed: true });
    expect(layout).toMatchObject({ encoding: "utf-8", separator: ",", hasHeader: true, weekDay: "first", missingMeans: "unknown", tax: "included" });
    expect(preview).toMatchObject({ missing: [], warnings: [] });
    expect(preview.rows).toEqual([expect.objectContaining({ line: 2, fields: ["2026-06-01", "S1", "P1", "12", "21.48", "1.79", "", "0", "0", "none"], problems: [] })]);
  });

  it("can be given a layout all the same, and is read by it from then on", async () => {
    const extract = await checked(test, { file: salesFile("2026-06-07,S3,P1,12,21.48,1.79,,0,0,none") });
    expect(extract).toMatchObject({ state: "unusable", failure: { code: "no-usable-row" } });
    const again = await confirmed(extract, { changes: { weekDay: "last" } });
    expect(again).toMatchObject({ state: "checked", firstWeek: "2026-06-01", layout: { origin: "chosen", isConfirmed: true } });
    expect(await afterJob(test, await act(test, `/api/extracts/${extract.id}/check`).expect(202))).toMatchObject({ state: "checked", layout: { origin: "chosen" } });
  });
});

describe("a file in another form", () => {
  it("is read by what its first rows tell, and not loaded before a person has confirmed that", async () => {
    const extract = await checked(test, { file: germanFile });
    expect(extract).toMatchObject({
      state: "checked", rows: { read: 2, usable: 2, errors: 0 }, firstWeek: "2026-05-25",
      layout: { origin: "proposed", isConfirmed: false, name: null }, may: { load: false, check: true },
    });
    expectProblem(await act(test, `/api/extracts/${extract.id}/load`).send({ secondLook: true }), 409, "layout-unconfirmed");
    const { body } = await read(test, `/api/extracts/${extract.id}`).expect(200);
    expect(body.state).toBe("checked");
  });

  it("shows its first rows as they stand and as they are read", async () => {
    const { layout, preview } = await layoutOf(await checked(test, { file: german("31.05.2026;S1;P1;1.234,5;2.209,76;1,79", "32.05.2026;S1;P2;x;1,00;", "07.06.2026;S1;P1;1;1,79;1,79", "14.06.2026;S1;P1;1;1,79;1,79", "24.05.2026;S1;P1;1;1,79;1,79") }));
    expect(layout).toMatchObject({ separator: ";", decimal: ",", thousands: ".", dateOrder: "dmy", weekDay: "last" });
    expect(preview.fileColumns[0]).toEqual({
      name: "Woche bis", position: 0, samples: ["31.05.2026", "32.05.2026", "07.06.2026", "14.06.2026", "24.05.2026"], proposed: "week", why: expect.stringMatching(/usual name/), confidence: 0.9,
    });
    expect(preview.columns).toEqual(["week", "store", "product", "units", "net_sales", "regular_price"]);
    expect(preview.rows[0]).toEqual({
      line: 2, fields: ["31.05.2026", "S1", "P1", "1.234,5", "2.209,76", "1,79"], values: ["2026-05-25", "S1", "P1", "1234.5", "2209.76", "1.79"], problems: [],
    });
    expect(preview.rows[1]).toMatchObject({
      line: 3, values: ["", "S1", "P2", "", "1.00", ""],
      problems: [{ column: "week", value: "32.05.2026", reason: "There is no such day in the calendar" }, { column: "units", value: "x", reason: expect.stringMatching(/not a number/) }],
    });
    expect(preview.missing).toEqual([]);
  });

  it("has its faults named by its own columns, with the values as they stand there", async () => {
    const extract = await checked(test, { file: german("31.05.2026;S9;P1;1,5;2,69;1,79", "31.05.2026;S1;P1;1.5;2,69;1,79", "07.06.2026;S1;P1;1,5;2,69;1,79", "02.06.2026;S1;P1;1,5;2,69;1,79") });
    expect(await issuesOf(extract)).toEqual([
      expect.objectContaining({ line: 2, column: "Filiale (store)", value: "S9", rule: "unknown-store" }),
      {
        line: 3, column: "Menge (units)", value: "1.5", severity: "error", rule: "unreadable-number",
        reason: expect.stringMatching(/decimals by ","/), remedy: expect.stringMatching(/How it is read/),
      },
      expect.objectContaining({ line: 5, column: "Woche bis (week)", value: "02.06.2026", rule: "not-week-start" }),
    ]);
    expect(extract.rows).toMatchObject({ read: 4, usable: 1, errors: 3 });
  });

  it("is loaded once it is confirmed, with the values that it means", async () => {
    const extract = await checked(test, { file: germanFile, name: "tills.csv" });
    const again = await confirmed(extract);
    expect(again).toMatchObject({ state: "checked", layout: { origin: "chosen", isConfirmed: true }, may: { load: true } });
    expect(await load(again)).toMatchObject({ state: "loaded" });
    expect((await storedSales(test)).filter(({ file }) => file === "tills.csv")).toEqual([
      { week: "2026-05-25", store: "S1", product: "P1", units: "1234.5", price: "1.79", source: "paid", file: "tills.csv" },
      { week: "2026-05-25", store: "S2", product: "P1", units: "12", price: "1.79", source: "paid", file: "tills.csv" },
    ]);
    expect((await audited("extract.layout-chosen")).at(-1)).toMatchObject({ subject_id: extract.id, detail: { fileName: "tills.csv", savedAs: null, layout: { separator: ";" } } });
    expectProblem(await put(`/api/extracts/${extract.id}/layout`, { layout: (await layoutOf(extract)).layout }), 409, "layout-fixed");
  });

  it("says which columns are missing, and is read once somebody says where they are, without a new upload", async () => {
    const file = "\ud83d\udcc5;\ud83c\udfea;\ud83c\udf4e;\ud83d\udce6;\ud83d\udcb0\n2026-06-01;S4;P1;12;21.48\n";
    const extract = await checked(test, { file });
    expect(extract).toMatchObject({ state: "unusable", failure: { code: "layout-needed", detail: expect.stringMatching(/store.*need not be uploaded again/) }, layout: { origin: "proposed" } });
    const { layout, preview } = await layoutOf(extract);
    expect(preview.missing).toContain("store");
    const columns = ["week", "store", "product", "units", "net_sales"];
    const mapping: Layout["mapping"] = Object.fromEntries(columns.map((column, at) => [column, { from: "name", name: layout.theirColumns[at] ?? "" }]));
    expectProblem(await put(`/api/extracts/${extract.id}/layout`, { layout: { ...layout, mapping } }), 422, "layout-incomplete");
    const again = await confirmed(extract, { changes: { mapping: { ...mapping, regular_price: { from: "value", value: "1.79" } } } });
    expect(again).toMatchObject({ state: "checked", rows: { read: 1, usable: 1 }, sha256: extract.sha256 });
  });

  it("keeps asking while a date can be read in two ways, however often it is checked", async () => {
    const file = "week;store;product;units;net_sales;regular_price\n01/06/2026;S1;P1;12;21.48;1.79\n";
    const extract = await checked(test, { file });
    const again = await afterJob(test, await act(test, `/api/extracts/${extract.id}/check`).expect(202));
    expect(again).toMatchObject({ layout: { origin: "proposed", isConfirmed: false }, may: { load: false } });
    expect((await layoutOf(extract)).preview.warnings).toEqual([{ code: "dates-ambiguous", message: 'No date tells whether the day or the month comes first; "01/06/2026" is taken as 2026-06-01.' }]);
    await confirmed(extract);
    expect((await layoutOf(extract)).preview.warnings).toEqual([]);
  });
});

describe("tax that a file leaves out", () => {
  it("is added to net sales and prices by the product's rate of the week, none where it has none", async () => {
    const rows = ["2026-04-27;S3;P1;10;17,90;1,79", "2026-04-27;S3;P2;2,5;6,225;2,49"];
    const extract = await checked(test, { file: ["week;store;product;units;umsatz netto;regular_price", ...rows].join("\n"), name: "net.csv" });
    expect((await layoutOf(extract)).layout.tax).toBe("excluded");
    await load(await confirmed(extract));
    const { rows: stored } = await test.services.pool.query(`
      select p.code, net_sales::text, regular_price::text, price::text from weekly_sales join products p on p.id = product_id
      join extracts e on e.id = extract_id where e.file_name = 'net.csv' order by p.code`);
    expect(stored).toEqual([
      { code: "P1", net_sales: "21.6590", regular_price: "2.1659", price: "2.1659" },
      { code: "P2", net_sales: "6.7853", regular_price: "2.7141", price: "2.7141" },
    ]);
  });

  it("is added to the regular price of a product by the rate in its row", async () => {
    const file = "product;name;category;regular price;tax rate\nT1;Tea;drinks;2,0001;21 %\nT2;Salt;pantry;1,10;\n";
    const extract = await checked(test, { kind: "products", file });
    await load(await confirmed(extract, { changes: { tax: "excluded" } }));
    const { rows } = await test.services.pool.query("select code, regular_price::text, tax_rate::text from product_terms join products p on p.id = product_id where code like 'T%' order by code");
    expect(rows).toEqual([{ code: "T1", regular_price: "2.4201", tax_rate: "0.2100" }, { code: "T2", regular_price: "1.1000", tax_rate: "0.0000" }]);
  });

  it("leaves no room for amounts that could not be kept with it", async () => {
    const extract = await checked(test, { file: "week;store;product;units;umsatz netto;regular_price\n2026-06-01;S1;P1;10;6000000000,5;1,79\n2026-06-01;S2;P1;10;17,90;1,79\n" });
    expect(await issuesOf(extract)).toEqual([expect.objectContaining({ column: "umsatz netto (net_sales)", value: "6000000000,5", rule: "too-large" })]);
  });
});

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

describe("between a new layout and the check by it", () => {
  it("there is nothing to load, and the layout can be changed again", async () => {
    const idle = await startExtractsApp({ worker: false });
    try {
      await loadCatalogueDirectly(idle);
      const { id } = await checkedDirectly(idle, { file: german("31.05.2026;S3;P1;1,5;2,69;1,79") });
      const { body } = await read(idle, `/api/extracts/${id}/layout`).expect(200);
      const choose = (layout: Layout) => request(idle.app).put(`/api/extracts/${id}/layout`).set("Authorization", idle.dataAdmin).send({ layout });
      const { body: first } = await choose(body.layout).expect(202);
      expect((await read(idle, `/api/extracts/${id}`)).body).toMatchObject({ state: "received", rows: null, layout: { origin: "chosen", isConfirmed: true }, may: { load: false } });
      expectProblem(await act(idle, `/api/extracts/${id}/load`), 409, "not-checked");
      const { body: second } = await choose({ ...body.layout, weekDay: "first" }).expect(202);
      expect(second.jobId).toBe(first.jobId);
    } finally {
      await idle.stop();
    }
  });
});
