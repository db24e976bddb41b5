import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Layout } from "@shared/contract/layouts";
import { act, afterJob, checked, checkedDirectly, loadCatalogue, loadCatalogueDirectly, read, salesFile, startExtractsApp, storedSales, type ExtractsApp } from "../support/extracts";
import { german, germanFile, layoutsIn } from "../support/layouts";
import { expectProblem } from "../support/problems";

let test: ExtractsApp;
beforeAll(async () => {
  test = await startExtractsApp();
  await loadCatalogue(test);
});
afterAll(() => test.stop());

const { put, layoutOf, issuesOf, audited, confirmed, load } = layoutsIn(() => test);

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
