import { Readable } from "node:stream";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Layout } from "@shared/contract/layouts";
import { defaultWords } from "@shared/layouts";
import { checkExtract, loadExtract, receiveExtract, SavedLayoutEntity } from "../../server/features/extracts";
import { checkedDirectly, loadCatalogueDirectly, read, salesFile, salesHeader, startExtractsApp, type ExtractsApp } from "../support/extracts";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());
beforeEach(async () => {
  await test.services.pool.query("truncate weekly_sales, weekly_sales_history, sales_confirmations, listings");
  await test.services.pool.query("update stores set opened = null, closed = null");
});

type Found = { line: number; column: string; value: string; severity: string; rule: string; reason: string };

async function issuesOf(file: string, kind: ExtractKind = "sales"): Promise<{ rows: (number | null | undefined)[]; issues: Found[]; counts: Record<string, number> }> {
  const extract = await checkedDirectly(test, { kind, file });
  const { body } = await read(test, `/api/extracts/${extract.id}/issues?limit=1000`).expect(200);
  const issues = body.items.map(({ line, column, value, severity, rule, reason }: Found) => ({ line, column, value, severity, rule, reason }));
  const counts = Object.fromEntries(body.byRule.map(({ rule, count }: { rule: string; count: number }) => [rule, count]));
  return { rows: [extract.rowsRead, extract.rowsUsable], issues, counts };
}

async function load(file: string, kind: ExtractKind = "sales"): Promise<void> {
  const { id } = await checkedDirectly(test, { kind, file });
  await loadExtract(test.services, { extractId: id, seen: "everything" });
}

const mondays = (count: number, last = "2026-06-08") =>
  Array.from({ length: count }, (_, at) => new Date(Date.parse(last) - 7 * 86_400_000 * (count - 1 - at)).toISOString().slice(0, 10));
const row = (week: string, more: Partial<{ store: string; product: string; units: number; price: string; shelf: string; regular: string; mechanic: string }> = {}) => {
  const { store = "S1", product = "P1", units = 10, price = "1.79", shelf = "", regular = "", mechanic = "none" } = more;
  return `${week},${store},${product},${units},${(units * Number(price)).toFixed(2)},${regular},${shelf},0,0,${mechanic}`;
};
const good = row("2026-06-08");

describe("a GTIN whose last digit is wrong", () => {
  it("keeps its product out, with the digit that would be right", async () => {
    const { rows, issues } = await issuesOf("product,name,category,gtin\nP5,X,snacks,2000000000016\nP6,Y,snacks,2000000000015", "products");
    expect(rows).toEqual([2, 1]);
    expect(issues).toEqual([{ line: 2, column: "gtin", value: "2000000000016", severity: "error", rule: "gtin-check-digit", reason: "By GS1's rule the GTIN's last digit would be 5, not 6" }]);
  });

  it("is told apart from an unknown product in sales, and one of 8 digits is taken for a code", async () => {
    const { issues } = await issuesOf(salesFile(row("2026-06-08", { product: "2000000000016" }), row("2026-06-08", { product: "20000005" }), good));
    expect(issues.map(({ line, rule, reason }) => [line, rule, reason])).toEqual([
      [2, "gtin-check-digit", "By GS1's rule the GTIN's last digit would be 5, not 6"],
      [3, "unknown-product", "There is no product with this code or GTIN"],
    ]);
  });
});

describe("net sales", () => {
  const netSales = (units: number, paid: string, more: { shelf?: string; regular?: string; mechanic?: string }) =>
    `2026-06-08,S1,P1,${units},${paid},${more.regular ?? ""},${more.shelf ?? ""},0,0,${more.mechanic ?? "none"}`;

  it("more than a fifth away from units times shelf price are warned about", async () => {
    const { rows, issues } = await issuesOf(salesFile(netSales(10, "35.00", { shelf: "1.79" })));
    expect(rows).toEqual([1, 1]);
    expect(issues).toEqual([{ line: 2, column: "net_sales", value: "35.00", severity: "warning", rule: "net-sales-off", reason: "35.00 was paid, but 10 units at the shelf price of 1.79 come to 17.90" }]);
  });

  it("above units times regular price are warned about, but for a twentieth", async () => {
    const { issues } = await issuesOf(salesFile(netSales(10, "18.90", { regular: "1.79" })));
    expect(issues.map(({ column, rule, reason }) => [column, rule, reason])).toEqual([
      ["net_sales", "net-sales-off", "18.90 was paid, but 10 units at the regular price of 1.79 come to 17.90 only"],
    ]);
  });

  it.each([
    ["a fifth less than at the shelf price", netSales(10, "14.32", { shelf: "1.79" })],
    ["a fifth more", netSales(10, "21.48", { shelf: "1.79" })],
    ["a multi-buy far below the shelf price", netSales(10, "9.00", { shelf: "1.79", mechanic: "multi_buy" })],
    ["a coupon far below the shelf price", netSales(10, "9.00", { shelf: "1.79", mechanic: "coupon" })],
    ["a twentieth above the regular price", netSales(10, "18.79", { regular: "1.79" })],
    ["no price to compare with", netSales(10, "99.00", {})],
    ["returns", netSales(-2, "-3.58", { shelf: "1.79" })],
  ])("are right with %s", async (_, line) => {
    expect((await issuesOf(salesFile(line))).issues.filter(({ rule }) => rule === "net-sales-off")).toEqual([]);
  });
});

describe("a unit's cost above what was paid", () => {
  it("is warned about, and below it is not", async () => {
    const header = "week,store,product,units,net_sales,regular_price,unit_cost";
    const { rows, issues } = await issuesOf(`${header}\n2026-06-08,S1,P1,10,17.90,1.79,2.10\n2026-06-08,S2,P1,10,17.90,1.79,1.79`);
    expect(rows).toEqual([2, 2]);
    expect(issues).toEqual([{ line: 2, column: "unit_cost", value: "2.10", severity: "warning", rule: "cost-above-price", reason: "One unit cost 2.10, and 1.79 was paid for it" }]);
  });
});

describe("a price far from the product's median", () => {
  it("is warned about with both, the value as the file has it", async () => {
    const lines = mondays(6).map((week) => row(week));
    const odd = `2026-06-08,S2,P1,10,1790.00,,179.00,0,0,none`;
    const cheap = `2026-06-08,S3,P1,10,3.50,,,0,0,none`;
    const { rows, issues } = await issuesOf(salesFile(...lines, odd, cheap));
    expect(rows).toEqual([8, 8]);
    expect(issues).toEqual([
      { line: 8, column: "shelf_price", value: "179.00", severity: "warning", rule: "unusual-price", reason: "A price of 179, while the median of P1 is 1.79" },
      { line: 9, column: "net_sales", value: "3.50", severity: "warning", rule: "unusual-price", reason: "A price of 0.35, while the median of P1 is 1.79" },
    ]);
  });

  it("is seen in a file that is wrong throughout, by what is loaded", async () => {
    await load(salesFile(...["S1", "S2", "S3"].flatMap((store) => mondays(8, "2026-05-25").map((week) => row(week, { store })))));
    const { issues } = await issuesOf(salesFile(...["S1", "S2", "S3"].map((store) => row("2026-06-01", { store, price: "179" }))));
    expect(issues.map(({ line, rule, reason }) => [line, rule, reason])).toEqual([2, 3, 4].map((line) => [line, "unusual-price", "A price of 179, while the median of P1 is 1.79"]));
  });

  it("may be exactly five times it or a fifth of it", async () => {
    const { issues } = await issuesOf(salesFile(...mondays(5).map((week) => row(week, { price: "2" })), row("2026-06-08", { store: "S2", price: "10" }), row("2026-06-08", { store: "S3", price: "0.4" })));
    expect(issues).toEqual([]);
  });
});

describe("a week", () => {
  it("that has not begun keeps its row out, and one that is not over is warned about", async () => {
    const { rows, issues } = await issuesOf(salesFile(good, row("2026-06-15"), row("2026-06-22")));
    expect(rows).toEqual([3, 2]);
    expect(issues).toEqual([
      { line: 3, column: "week", value: "2026-06-15", severity: "warning", rule: "week-not-over", reason: "This week begins on 2026-06-15 and ends on 2026-06-21; today is 2026-06-15" },
      { line: 4, column: "week", value: "2026-06-22", severity: "error", rule: "week-in-future", reason: "This week begins on 2026-06-22 and ends on 2026-06-28; today is 2026-06-15" },
    ]);
  });
});

describe("sales of a store that was not open", () => {
  it("before its first day or after its last keep their rows out; in part of a week they are warned about", async () => {
    await test.services.pool.query("update stores set opened = '2026-05-14', closed = '2026-06-02' where code = 'S1'");
    const { rows, issues } = await issuesOf(salesFile(...mondays(6).map((week) => row(week))));
    expect(rows).toEqual([6, 4]);
    expect(issues).toEqual([
      { line: 2, column: "week", value: "2026-05-04", severity: "error", rule: "before-opening", reason: "The store opened on 2026-05-14, after this week" },
      { line: 3, column: "week", value: "2026-05-11", severity: "warning", rule: "partly-open", reason: "The store opened on 2026-05-14, so it was open on at most 4 days of this week" },
      { line: 6, column: "week", value: "2026-06-01", severity: "warning", rule: "partly-open", reason: "The store closed for good on 2026-06-02, so it was open on at most 2 days of this week" },
      { line: 7, column: "week", value: "2026-06-08", severity: "error", rule: "after-closing", reason: "The store closed for good on 2026-06-02, before this week" },
    ]);
  });

  it("are right where the row knows on how few days it was open", async () => {
    await test.services.pool.query("update stores set opened = '2026-06-11' where code = 'S1'");
    const header = "week,store,product,units,net_sales,regular_price,open_days";
    expect((await issuesOf(`${header}\n2026-06-08,S1,P1,10,17.90,1.79,4`)).issues).toEqual([]);
    const { issues } = await issuesOf(`${header}\n2026-06-08,S1,P1,10,17.90,1.79,7`);
    expect(issues.map(({ column, value, rule }) => [column, value, rule])).toEqual([["open_days", "7", "partly-open"]]);
  });
});

describe("sales outside the product's listing", () => {
  it("are warned about where the product has listings in that store, and only there", async () => {
    await test.services.pool.query(`
      insert into listings (product_id, store_id, first_day, last_day)
      select p.id, s.id, '2026-05-20', '2026-06-01' from products p, stores s where p.code = 'P1' and s.code = 'S1'`);
    const { rows, issues } = await issuesOf(salesFile(...mondays(5).map((week) => row(week)), ...mondays(5).map((week) => row(week, { store: "S2" }))));
    expect(rows).toEqual([10, 10]);
    expect(issues).toEqual([
      { line: 2, column: "", value: "P1, S1, 2026-05-11", severity: "warning", rule: "outside-listing", reason: "P1 is listed in S1 from 2026-05-20 to 2026-06-01, but not in this week" },
      { line: 6, column: "", value: "P1, S1, 2026-06-08", severity: "warning", rule: "outside-listing", reason: "P1 is listed in S1 from 2026-05-20 to 2026-06-01, but not in this week" },
    ]);
  });
});

describe("weeks without a row between others", () => {
  it("of the file are told at the row behind them, and counted in rows", async () => {
    const [a, , , d, , f] = mondays(6);
    const { rows, issues, counts } = await issuesOf(salesFile(...[a, d, f].map((week) => row(week ?? ""))));
    expect(rows).toEqual([3, 3]);
    expect(issues).toEqual([{
      line: 3, column: "week", value: "2026-05-11, 2026-05-18, 2026-06-01", severity: "warning", rule: "missing-weeks",
      reason: "P1 has rows in S1 before and after these weeks, but none for them",
    }]);
    expect(counts).toEqual({ "missing-weeks": 3 });
  });

  it("are told together for the products of a store that lack the same", async () => {
    const weeks = ["2026-05-25", "2026-06-08"];
    const { issues, counts } = await issuesOf(salesFile(...weeks.flatMap((week) => ["P1", "P2"].map((product) => row(week, { product, price: "2" })))));
    expect(issues.map(({ line, value, reason }) => [line, value, reason])).toEqual([
      [4, "2026-06-01", "2 products, P1 for one, have rows in S1 before and after this week, but none for it"],
    ]);
    expect(counts).toEqual({ "missing-weeks": 2 });
  });

  it("between the file and what is loaded are told, and those that are loaded are not", async () => {
    await load(salesFile(row("2026-05-11"), row("2026-05-18"), row("2026-05-11", { store: "S2" }), row("2026-06-01", { store: "S2" })));
    const { issues } = await issuesOf(salesFile(row("2026-06-08"), row("2026-05-18", { store: "S2" }), row("2026-05-25", { store: "S2" })));
    expect(issues.map(({ line, value, reason }) => [line, value, reason])).toEqual([
      [2, "2026-05-25, 2026-06-01", "P1 has rows in S1 before and after these weeks, but none for them"],
    ]);
  });

  it("are none while the store was closed or the product not listed, nor far from what is loaded", async () => {
    await load(salesFile(row("2026-01-05", { store: "S3" })));
    await test.services.pool.query(`
      insert into listings (product_id, store_id, first_day, last_day)
      select p.id, s.id, d::date, e::date from products p, stores s, (values ('2026-05-01', '2026-05-24'), ('2026-06-08', null)) days (d, e)
      where p.code = 'P1' and s.code = 'S2'`);
    const { issues } = await issuesOf(salesFile(row("2026-05-18", { store: "S2" }), row("2026-06-08", { store: "S2" }), row("2026-06-08", { store: "S3" })));
    expect(issues).toEqual([]);
  });

  it("are none where a product comes back after more than a year", async () => {
    const rows = (weeksAway: number) => salesFile(row(new Date(Date.parse("2026-06-08") - 7 * 86_400_000 * weeksAway).toISOString().slice(0, 10)), row("2026-06-08"));
    expect((await issuesOf(rows(54))).counts).toEqual({});
    expect((await issuesOf(rows(53))).counts).toEqual({ "missing-weeks": 52 });
  });

  it("are not named one by one where they are many", async () => {
    const [first = "", last = ""] = [mondays(11)[0], mondays(1)[0]];
    expect((await issuesOf(salesFile(row(first), row(last)))).issues.map(({ value }) => value)).toEqual([`${mondays(11).slice(1, 7).join(", ")} and 3 more`]);
  });

  it("are none where the source leaves out what was not sold", async () => {
    const columns = salesHeader.split(",");
    const layout: Layout = {
      kind: "sales", encoding: "utf-8", separator: ",", linesAbove: 0, hasHeader: true, theirColumns: columns, decimal: ".", thousands: "",
      dateOrder: "iso", weekDay: "first", mapping: Object.fromEntries(columns.map((name) => [name, { from: "name", name }])), words: defaultWords,
      missingMeans: "zero", tax: "included",
    };
    const em = test.services.orm.em.fork();
    await em.persist(em.create(SavedLayoutEntity, { name: "Tills", kind: "sales", layout, updatedBy: test.dataAdminId, updatedAt: new Date() })).flush();
    const received = await receiveExtract(test.services, {
      body: Readable.from([Buffer.from(salesFile(row("2026-05-25"), row("2026-06-08")))]), fileName: "a.csv", kind: "sales", personId: test.dataAdminId, layout: "Tills", inBackground: false,
    });
    expect(await checkExtract(test.services, { extractId: received.id })).toMatchObject({ state: "checked", rowsUsable: 2, warningCount: 0, layoutOrigin: "saved" });
  });
});
