import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import type { Extract } from "@shared/contract/extracts";
import { commonestPrice, modelledPrice } from "@shared/planning";
import { checkExtract, loadExtract } from "../../server/features/extracts";
import { act, afterJob, checked, loadCatalogue, loaded, read, salesFile, startExtractsApp, storedSales, type ExtractsApp } from "../support/extracts";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp();
  await loadCatalogue(test);
});
afterAll(() => test.stop());
beforeEach(async () => {
  await test.services.pool.query("truncate weekly_sales, weekly_sales_history, sales_confirmations, extract_issues");
});

const row = (week: string, store: string, units: number, price = 1.79) => `${week},${store},P1,${units},${(units * price).toFixed(2)},1.79,,0,0,none`;
const [june1, june8] = ["2026-06-01", "2026-06-08"];

/** The same draws between 0 and 1 each time (Park and Miller 1988, minimal standard). */
function seededDraws(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 16_807) % 2_147_483_647;
    return state / 2_147_483_647;
  };
}

const changesOf = async ({ id }: Extract) => (await read(test, `/api/extracts/${id}/changes`).expect(200)).body;
const load = (extract: Extract, body?: object) => act(test, `/api/extracts/${extract.id}/load`).send(body);
const withdraw = (extract: Extract) => act(test, `/api/extracts/${extract.id}/withdraw`);
const brief = (sales: Awaited<ReturnType<typeof storedSales>>) => sales.map(({ week, store, units, file }) => `${week} ${store} ${units} ${file}`);

describe("a load", () => {
  it("puts the usable rows in and says what it changed", async () => {
    const extract = await loaded(test, { name: "a.csv", file: salesFile(row(june1, "S1", 10), row(june8, "S1", 12.5), row(june8, "S9", 1)) });
    expect(extract).toMatchObject({ state: "loaded", failure: null, firstWeek: june1, lastWeek: june8, may: { check: false, load: false, withdraw: true } });
    expect(brief(await storedSales(test))).toEqual([`${june1} S1 10 a.csv`, `${june8} S1 12.5 a.csv`]);
    expect(await changesOf(extract)).toEqual({
      totals: { new: 2, changed: 0, same: 0, missing: 0 },
      weeks: [
        { week: june1, new: 1, changed: 0, same: 0, missing: 0, unitsBefore: 0, unitsAfter: 10 },
        { week: june8, new: 1, changed: 0, same: 0, missing: 0, unitsBefore: 0, unitsAfter: 12.5 },
      ],
      secondLook: [],
    });
    const { body: job } = await read(test, `/api/jobs/${extract.jobId}`).expect(200);
    expect(job).toMatchObject({ kind: "load-extract", state: "succeeded", result: { new: 2, changed: 0, same: 0, missing: 0 }, progress: { done: 4, total: 4 } });
    const { rows: trail } = await test.services.pool.query("select detail, token_id, person_id from audit_entries where action = 'extract.loaded' and subject_id = $1", [extract.id]);
    expect(trail).toEqual([{ detail: { fileName: "a.csv", new: 2, changed: 0, same: 0, missing: 0 }, token_id: expect.any(String), person_id: extract.uploadedBy.id }]);
  });

  it("is previewed before: new, changed and same rows by week, with units before and after", async () => {
    await loaded(test, { file: salesFile(row(june1, "S1", 10), row(june1, "S2", 20), row(june8, "S1", 5)) });
    const next = await checked(test, { file: salesFile(row(june1, "S1", 11), row(june1, "S2", 20), row(june1, "S3", 3), row(june8, "S1", 5)) });
    expect(next.may).toEqual({ check: true, load: true, withdraw: false });
    expect(await changesOf(next)).toEqual({
      totals: { new: 1, changed: 1, same: 2, missing: 0 },
      weeks: [
        { week: june1, new: 1, changed: 1, same: 1, missing: 0, unitsBefore: 30, unitsAfter: 34 },
        { week: june8, new: 0, changed: 0, same: 1, missing: 0, unitsBefore: 5, unitsAfter: 5 },
      ],
      secondLook: [],
    });
  });

  it("of the same file again changes nothing and says so", async () => {
    const file = salesFile(row(june1, "S1", 10), row(june1, "S2", 0), row(june8, "S1", 5));
    await loaded(test, { name: "first.csv", file });
    const before = await storedSales(test);
    const again = await loaded(test, { name: "second.csv", file });
    expect((await changesOf(again)).totals).toEqual({ new: 0, changed: 0, same: 3, missing: 0 });
    expect(await storedSales(test)).toEqual(before);
    expect((await test.services.pool.query("select 1 from weekly_sales_history")).rows).toEqual([]);
  });

  it("keeps what it replaces, as it was", async () => {
    const first = await loaded(test, { file: salesFile(row(june1, "S1", 10)) });
    const second = await loaded(test, { file: salesFile(row(june1, "S1", 11)) });
    const { rows } = await test.services.pool.query("select units::float8, extract_id, replaced_by from weekly_sales_history");
    expect(rows).toEqual([{ units: 10, extract_id: first.id, replaced_by: second.id }]);
  });

  it("makes a partition for each year it needs, and no other", async () => {
    await loaded(test, { file: salesFile(row("2019-12-30", "S1", 1), row("2021-01-04", "S1", 1)) });
    const { rows } = await test.services.pool.query("select to_regclass('weekly_sales_2019') is not null as y2019, to_regclass('weekly_sales_2020') is null as y2020, to_regclass('weekly_sales_2021') is not null as y2021");
    expect(rows).toEqual([{ y2019: true, y2020: true, y2021: true }]);
  });

  it("keeps every column of the file", async () => {
    const header = "week,store,product,units,net_sales,regular_price,shelf_price,feature,display,mechanic,promotion_days,open_days,stock_out_days,unit_cost,temperature_c,event";
    await loaded(test, { file: `${header}\n2026-06-01,S1,2000000000015,3.125,4.5,1.79,1.5,1,0,Multi_Buy,5,6,2,0.71,-3.4,"fair, summer"` });
    const { rows } = await test.services.pool.query(`
      select units::text, net_sales::text, regular_price::text, shelf_price::text, feature, display, mechanic, promotion_days,
        open_days, stock_out_days, unit_cost::text, temperature_c, event from weekly_sales`);
    expect(rows).toEqual([{
      units: "3.125", net_sales: "4.5000", regular_price: "1.7900", shelf_price: "1.5000", feature: true, display: false, mechanic: "multi_buy",
      promotion_days: 5, open_days: 6, stock_out_days: 2, unit_cost: "0.7100", temperature_c: -3.4, event: "fair, summer",
    }]);
  });
});

describe("the price modelled", () => {
  const priced = async () => (await storedSales(test)).map(({ store, price, source }) => [store, price, source]);

  it("is the shelf price, else what was paid, else the region's commonest, else the regular price", async () => {
    await loaded(test, { file: salesFile(
      "2026-06-01,S1,P1,10,17.90,1.99,1.59,0,0,none", // shelf
      "2026-06-01,S2,P1,3,5,1.99,,0,0,none", // paid: 1.6667
      "2026-06-01,S3,P1,0,0,1.99,,0,0,none", // region: 1.59 and 1.6667 once each, so the lower
      "2026-06-01,S4,P1,0,0,2.05,,0,0,none", // alone on the moor: regular price of the row
      "2026-06-01,S4,P2,0,0,,,0,0,none", // regular price of the product's terms
    ) });
    expect(await priced()).toEqual([["S1", "1.59", "shelf"], ["S2", "1.6667", "paid"], ["S3", "1.59", "region"], ["S4", "2.05", "regular"], ["S4", "2.49", "regular"]]);
  });

  it("follows the terms that hold in the middle of the week", async () => {
    const week = (day: string) => `${day},S4,P1,0,0,,,0,0,none`;
    await loaded(test, { file: salesFile(week("2024-12-23"), week("2024-12-30"), week("2026-04-27"), week("2026-05-04")) });
    // Terms hold from Wednesday 1 January 2025 and from Friday 1 May 2026.
    expect((await storedSales(test)).map(({ price, source }) => [price, source])).toEqual([[null, "unknown"], ["1.79", "regular"], ["1.79", "regular"], ["1.99", "regular"]]);
  });

  it("is what planning would say, row by row, of any file", async () => {
    const draw = seededDraws(7);
    const cells = ["S1", "S2", "S3", "S4"].flatMap((store) => Array.from({ length: 25 }, (_, at) => {
      const week = new Date(Date.UTC(2025, 11, 22 + 7 * at)).toISOString().slice(0, 10);
      const units = draw() < 0.4 ? 0 : Math.ceil(draw() * 9);
      const netSales = units === 0 ? 0 : Math.round(units * [1.79, 1.49, 1.33][Math.floor(draw() * 3)]! * 100) / 100;
      return { week, store, units, netSales, shelfPrice: draw() < 0.2 ? 1.59 : null, regularPrice: draw() < 0.7 ? 1.99 : null };
    }));
    await loaded(test, { file: salesFile(...cells.map(({ week, store, units, netSales, shelfPrice, regularPrice }) =>
      `${week},${store},P1,${units},${netSales},${regularPrice ?? ""},${shelfPrice ?? ""},0,0,none`)) });
    const region = (store: string) => (store === "S4" ? "moor" : "coast");
    const told = cells.map((cell) => ({ ...cell, ...modelledPrice({ ...cell, regionPrice: null, regularPrice: null }) }));
    const expected = cells.map((cell) => {
      const neighbours = told.filter(({ week, store, price }) => week === cell.week && region(store) === region(cell.store) && price !== null);
      const regionPrice = commonestPrice(neighbours.map(({ price }) => price ?? 0));
      const terms = cell.week >= "2026-04-28" ? 1.99 : 1.79;
      const { price, source } = modelledPrice({ ...cell, regionPrice, regularPrice: cell.regularPrice ?? terms });
      return `${cell.week} ${cell.store} ${price} ${source}`;
    });
    expect((await storedSales(test)).map(({ week, store, price, source }) => `${week} ${store} ${price} ${source}`)).toEqual(expected.sort());
  });

  it("of a week without sales follows what other stores of the region are loaded with later, and back again", async () => {
    await loaded(test, { file: salesFile("2026-06-01,S3,P1,0,0,1.99,,0,0,none") });
    expect(await priced()).toEqual([["S3", "1.99", "regular"]]);
    const later = await loaded(test, { file: salesFile("2026-06-01,S1,P1,5,6.5,1.99,,0,0,none") });
    expect(await priced()).toEqual([["S1", "1.3", "paid"], ["S3", "1.3", "region"]]);
    await afterJob(test, await withdraw(later).expect(202));
    expect(await priced()).toEqual([["S3", "1.99", "regular"]]);
  });
});

describe("a withdrawal", () => {
  it("puts back exactly what was there before, also where a later load touched other rows", async () => {
    await loaded(test, { name: "a.csv", file: salesFile(row(june1, "S1", 10), row(june1, "S2", 20)) });
    const before = await test.services.pool.query("select * from weekly_sales order by store_id, week");
    const second = await loaded(test, { name: "b.csv", file: salesFile(row(june1, "S1", 99), row(june8, "S1", 1)) });
    const third = await loaded(test, { name: "c.csv", file: salesFile(row(june8, "S4", 7)) });
    const withdrawn = await afterJob(test, await withdraw(second).expect(202));
    expect(withdrawn).toMatchObject({ state: "withdrawn", withdrawnAt: expect.any(String), may: { check: false, load: false, withdraw: false } });
    expect(brief(await storedSales(test))).toEqual([`${june1} S1 10 a.csv`, `${june1} S2 20 a.csv`, `${june8} S4 7 c.csv`]);
    await afterJob(test, await withdraw(third).expect(202));
    expect((await test.services.pool.query("select * from weekly_sales order by store_id, week")).rows).toEqual(before.rows);
    expect((await test.services.pool.query("select 1 from weekly_sales_history")).rows).toEqual([]);
  });

  it("is refused, with the reason, where a later load changed the same rows; in turn it works", async () => {
    const first = await loaded(test, { name: "a.csv", file: salesFile(row(june1, "S1", 10)) });
    const second = await loaded(test, { name: "b.csv", file: salesFile(row(june1, "S1", 11)) });
    const { body } = await withdraw(first).expect(409);
    expect(body).toMatchObject({ code: "touched-later", detail: "b.csv, loaded later, holds the same products, stores and weeks in one row. Withdraw that first, or load a corrected file over both." });
    expect(brief(await storedSales(test))).toEqual([`${june1} S1 11 b.csv`]);
    await afterJob(test, await withdraw(second).expect(202));
    expect(brief(await storedSales(test))).toEqual([`${june1} S1 10 a.csv`]);
    await afterJob(test, await withdraw(first).expect(202));
    expect(await storedSales(test)).toEqual([]);
  });

  it("is refused where a later load holds the same rows unchanged, since it would take them from that too", async () => {
    const first = await loaded(test, { name: "a.csv", file: salesFile(row(june1, "S1", 10), row(june1, "S2", 20)) });
    const second = await loaded(test, { name: "b.csv", file: salesFile(row(june1, "S2", 20), row(june1, "S3", 30)) });
    expect((await withdraw(first).expect(409)).body.code).toBe("touched-later");
    await afterJob(test, await withdraw(second).expect(202));
    await afterJob(test, await withdraw(first).expect(202));
    expect(await storedSales(test)).toEqual([]);
  });

  it("is refused of what is not loaded, and of files that are no sales", async () => {
    const sales = await checked(test, { file: salesFile(row(june1, "S1", 10)) });
    expect((await withdraw(sales).expect(409)).body.code).toBe("not-loaded");
    const stores = await loaded(test, { kind: "stores", file: "store,name,region\nS4,High Moor,moor" });
    expect(stores.may.withdraw).toBe(false);
    expect((await withdraw(stores).expect(422)).body.code).toBe("not-withdrawable");
  });
});

describe("loading is refused", () => {
  it("of a file that cannot be used", async () => {
    const extract = await checked(test, { file: "week,store\n" });
    expect((await load(extract).expect(409)).body.code).toBe("not-checked");
  });

  it("a second time, once it is loaded", async () => {
    const extract = await loaded(test, { file: salesFile(row(june1, "S1", 10)) });
    expect((await load(extract).expect(409)).body.code).toBe("already-loaded");
    expect((await act(test, `/api/extracts/${extract.id}/check`).expect(409)).body.code).toBe("not-checkable");
  });
});

describe("two loads", () => {
  it("of one extract at once are one", async () => {
    const extract = await checked(test, { file: salesFile(row(june1, "S1", 10)) });
    const answers = await Promise.all([load(extract), load(extract)]);
    expect(answers.map(({ status }) => status)).toEqual([202, 202]);
    expect(answers[0]?.body.jobId).toBe(answers[1]?.body.jobId);
    expect((await afterJob(test, answers[0]!)).state).toBe("loaded");
  });

  it("of files with the same rows do not mix", async () => {
    const stores = ["S1", "S2", "S3", "S4"];
    const weeks = Array.from({ length: 20 }, (_, at) => new Date(Date.UTC(2026, 0, 5 + 7 * at)).toISOString().slice(0, 10));
    const fileOf = (units: number) => salesFile(...weeks.flatMap((week) => stores.map((store) => row(week, store, units))));
    const extracts = await Promise.all([1, 2].map((units) => checked(test, { name: `${units}.csv`, file: fileOf(units) })));
    const totals = await Promise.all(extracts.map(({ id }) => loadExtract(test.services, { extractId: id, seen: "everything" })));
    expect(totals).toContainEqual({ new: 80, changed: 0, same: 0, missing: 0 });
    expect(totals).toContainEqual({ new: 0, changed: 80, same: 0, missing: 0 });
    expect(new Set((await storedSales(test)).map(({ file }) => file)).size).toBe(1);
  });
});

describe("a load that breaks down", () => {
  it("at its last step leaves nothing, and works when tried again", async () => {
    await loaded(test, { name: "a.csv", file: salesFile(row(june1, "S1", 10)) });
    const { id } = await checked(test, { name: "b.csv", file: salesFile(row(june1, "S1", 11), row(june8, "S1", 12)) });
    const breaks = loadExtract(test.services, {
      extractId: id,
      async progress({ message }) {
        if (message === "Loaded") throw new Error("the worker lost its job");
      },
    });
    await expect(breaks).rejects.toThrow("the worker lost its job");
    expect(brief(await storedSales(test))).toEqual([`${june1} S1 10 a.csv`]);
    expect((await test.services.pool.query("select 1 from weekly_sales_history")).rows).toEqual([]);
    expect(await loadExtract(test.services, { extractId: id })).toEqual({ new: 1, changed: 1, same: 0, missing: 0 });
    expect(await loadExtract(test.services, { extractId: id })).toEqual({ new: 1, changed: 1, same: 0, missing: 0 });
    expect(brief(await storedSales(test))).toEqual([`${june1} S1 11 b.csv`, `${june8} S1 12 b.csv`]);
  });

  it("because the database server lost the rows that waited reads the file again", async () => {
    const { id } = await checked(test, { file: salesFile(row(june1, "S1", 10), row(june1, "S9", 1), row(june8, "S1", 3), row(june8, "S1", 3)) });
    // What PostgreSQL does to unlogged tables when it recovers from a crash.
    await test.services.pool.query(`truncate staging."rows_${id.replaceAll("-", "")}"`);
    expect(await loadExtract(test.services, { extractId: id })).toEqual({ new: 2, changed: 0, same: 0, missing: 0 });
    expect(await storedSales(test)).toHaveLength(2);
  });

  it("asks for a new check where the file would be read differently by now", async () => {
    const file = salesFile(row(june1, "S77", 10), row(june1, "S1", 10));
    const extract = await checked(test, { file });
    await test.services.pool.query(`truncate staging."rows_${extract.id.replaceAll("-", "")}"`);
    await loaded(test, { kind: "stores", file: "store,name,region\nS77,Late Corner,coast" });
    const failed = await afterJob(test, await load(extract).expect(202));
    expect(failed).toMatchObject({ state: "checked", failure: { code: "check-outdated" }, may: { load: true, check: true } });
    expect(await storedSales(test)).toEqual([]);
    expect(await checkExtract(test.services, { extractId: extract.id })).toMatchObject({ state: "checked", rowsUsable: 2, failure: null });
  });
});
