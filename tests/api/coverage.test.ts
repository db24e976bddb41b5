import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import type { Coverage } from "@shared/contract/coverage";
import { loadExtract, resumeCoverage, withdrawExtract } from "../../server/features/extracts";
import { refreshCoverage } from "../../server/features/extracts/coverage/refresh-coverage.service";
import { jobDefinitions } from "../../server/job-definitions";
import { checkedDirectly, loadCatalogueDirectly, loaded, read, salesFile, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { bearerOf } from "../support/people";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());
beforeEach(async () => {
  await test.services.pool.query("truncate weekly_sales, weekly_sales_history, sales_confirmations, store_weeks");
  await test.services.pool.query("update stores set opened = null, closed = null; update chain set week_start = 1; delete from extracts where kind = 'sales'");
});

// Today is Monday 15 June 2026: the last week that has ended is that of 8 June.
const [may25, june1, june8] = ["2026-05-25", "2026-06-01", "2026-06-08"];
const row = (week: string, store: string, { product = "P1", units = 1 } = {}) => `${week},${store},${product},${units},${(units * 1.79).toFixed(2)},1.79,,0,0,none`;

const coverage = async (query = ""): Promise<Coverage> => (await read(test, `/api/coverage${query}`).expect(200)).body;
async function load(name: string, ...rows: string[]): Promise<string> {
  const { id } = await checkedDirectly(test, { name, file: salesFile(...rows) });
  await loadExtract(test.services, { extractId: id, seen: "everything" });
  return id;
}
const withdraw = (extractId: string) => withdrawExtract(test.services, { extractId });
const count = () => refreshCoverage(test.services);

/** A store's weeks in words: state, rows, file. */
function line({ stores, extracts }: Coverage, code: string): string[] {
  const store = stores.find((candidate) => candidate.code === code);
  if (!store) throw new Error(`There is no store ${code}.`);
  return store.states.map((state, at) => [state, store.rows[at] || "", extracts[store.files[at] ?? -1]?.fileName ?? ""].join(" ").trim());
}

describe("GET /api/coverage", () => {
  it("tells of each store and week what is loaded, from which file, and what is missing", async () => {
    await load("a.csv", row(may25, "S1"), row(may25, "S1", { product: "P2" }), row(june8, "S1"), row(june8, "S1", { product: "P2" }), row(june1, "S2"));
    await count();
    const picture = await coverage("?weeks=3");
    expect(picture).toMatchObject({ weeks: [may25, june1, june8], extracts: [{ fileName: "a.csv" }], isBehind: false });
    expect(picture.stores.map(({ code, name, region }) => `${code} ${name}, ${region}`)).toEqual([
      "S1 Harbour Street, coast", "S2 Mill Lane, coast", "S3 Church Hill, coast", "S4 High Moor, moor",
    ]);
    expect(line(picture, "S1")).toEqual(["there 2 a.csv", "missing", "there 2 a.csv"]);
    expect(line(picture, "S2")).toEqual(["missing", "there 1 a.csv", "missing"]);
    expect(line(picture, "S4")).toEqual(["missing", "missing", "missing"]);
  });

  it("shows 52 weeks up to the last that has ended, and takes any day of a week for it", async () => {
    expect((await coverage()).weeks).toHaveLength(52);
    expect((await coverage()).weeks.at(-1)).toBe(june8);
    expect((await coverage("?weeks=2&until=2026-06-03")).weeks).toEqual([may25, june1]);
    expect((await coverage("?weeks=1&until=2030-01-01")).weeks).toEqual([june8]);
    await load("early.csv", row("2026-06-15", "S1"));
    await count();
    expect((await coverage("?weeks=1&until=2030-01-01")).weeks).toEqual(["2026-06-15"]);
  });

  it("calls a week thin that has less than half of the rows usual for the store", async () => {
    const usual = ["2026-05-04", "2026-05-11", "2026-05-18"].flatMap((week) => [row(week, "S1"), row(week, "S1", { product: "P2" })]);
    await test.services.pool.query("insert into products (code, name, category_id) select 'P3', 'Third', min(id) from categories on conflict do nothing");
    await load("a.csv", ...usual, ...["2026-05-04", "2026-05-11", "2026-05-18"].map((week) => row(week, "S1", { product: "P3" })), row(june1, "S1"));
    await count();
    expect(line(await coverage("?weeks=4"), "S1")).toEqual(["there 3 a.csv", "missing", "thin 1 a.csv", "missing"]);
  });

  it("says where a later file changed rows, until that file is withdrawn", async () => {
    await load("first.csv", row(june1, "S1"), row(june1, "S2"), row(june8, "S1"));
    const later = await load("later.csv", row(june1, "S1", { units: 5 }), row(june1, "S2"));
    await count();
    expect(line(await coverage("?weeks=2"), "S1")).toEqual(["restated 1 later.csv", "there 1 first.csv"]);
    expect(line(await coverage("?weeks=2"), "S2")).toEqual(["there 1 first.csv", "missing"]);
    await withdraw(later);
    await count();
    expect(line(await coverage("?weeks=2"), "S1")).toEqual(["there 1 first.csv", "there 1 first.csv"]);
  });

  it("says what was withdrawn, and forgets it once the week is loaded again", async () => {
    const id = await load("wrong.csv", row(june1, "S1"), row(june1, "S2"));
    await count();
    await withdraw(id);
    await count();
    expect(line(await coverage("?weeks=2"), "S1")).toEqual(["withdrawn  wrong.csv", "missing"]);
    await load("right.csv", row(june1, "S1", { units: 3 }));
    await count();
    expect(line(await coverage("?weeks=2"), "S1")).toEqual(["there 1 right.csv", "missing"]);
    expect(line(await coverage("?weeks=2"), "S2")).toEqual(["withdrawn  wrong.csv", "missing"]);
  });

  it("knows of a file that was loaded and withdrawn before anybody counted", async () => {
    await withdraw(await load("brief.csv", row(june1, "S1")));
    await count();
    expect(line(await coverage("?weeks=1&until=2026-06-01"), "S1")).toEqual(["withdrawn  brief.csv"]);
    expect(line(await coverage("?weeks=1&until=2026-06-01"), "S2")).toEqual(["missing"]);
  });

  it("leaves no gap where a store was not yet open, or closed for good, but tells rows even there", async () => {
    await load("a.csv", row(may25, "S2"), row(june8, "S2", { product: "P2" }));
    await test.services.pool.query("update stores set opened = '2026-06-03' where code = 'S1'; update stores set closed = '2026-06-03' where code = 'S2'");
    await count();
    expect(line(await coverage("?weeks=3"), "S1")).toEqual(["closed", "missing", "missing"]);
    expect(line(await coverage("?weeks=3"), "S2")).toEqual(["there 1 a.csv", "missing", "there 1 a.csv"]);
    expect(line(await coverage("?weeks=3"), "S3")).toEqual(["missing", "missing", "missing"]);
  });

  it("goes by the chain's first day of the week, also for weeks counted under another", async () => {
    await load("a.csv", row(june1, "S1"));
    await count();
    await test.services.pool.query("update chain set week_start = 4");
    const picture = await coverage("?weeks=3");
    // Thursday 4 June begins the last week that has ended; Monday 1 June lies in that of Thursday 28 May.
    expect(picture.weeks).toEqual(["2026-05-21", "2026-05-28", "2026-06-04"]);
    expect(line(picture, "S1")).toEqual(["missing", "there 1 a.csv", "missing"]);
  });

  it("says that it is behind until a load is counted in, and counting again changes nothing", async () => {
    await load("a.csv", row(june1, "S1"));
    expect(await coverage("?weeks=2")).toMatchObject({ isBehind: true });
    expect(await count()).toBe(1);
    const counted = await coverage("?weeks=2");
    expect(counted.isBehind).toBe(false);
    await test.services.pool.query("update extracts set coverage_pending = true where kind = 'sales'");
    expect(await count()).toBe(1);
    expect(await count()).toBe(0);
    expect(await coverage("?weeks=2")).toEqual(counted);
  });

  it("counts rightly where several processes count at once while files are loaded", async () => {
    const files = Array.from({ length: 6 }, (_, at) => [`2026-05-${String(4 + 7 * (at % 3)).padStart(2, "0")}`, `S${1 + (at % 2)}`] as const);
    await Promise.all(files.map(async ([week, store], at) => {
      await load(`${at}.csv`, row(week, store, { product: at < 3 ? "P1" : "P2" }));
      await count();
    }));
    const { rows } = await test.services.pool.query(`
      select counted.store_id from store_weeks counted full join (select store_id, week, count(*) as row_count from weekly_sales group by 1, 2) stored
      using (store_id, week) where counted.row_count is distinct from stored.row_count`);
    expect(rows).toEqual([]);
    expect((await coverage()).isBehind).toBe(false);
  });

  it("is read by who is signed in and may read, and refuses what is no day or too many weeks", async () => {
    await request(test.app).get("/api/coverage").expect(401);
    const writer = await bearerOf(test.app, test.services, ["data-admin", "planner"], ["extracts:write"]);
    await request(test.app).get("/api/coverage").set("Authorization", writer).expect(403);
    for (const query of ["until=June", "weeks=0", "weeks=161", "weeks=two"]) await read(test, `/api/coverage?${query}`).expect(422);
  });
});

describe("500 stores in 160 weeks", () => {
  it("are answered in less than 2 MB, and in seconds even where much else is done", async () => {
    await test.services.pool.query("insert into stores (code, name, region) select 'T' || n, 'Store ' || n, 'town' from generate_series(1, 500) n");
    await test.services.pool.query(`
      insert into store_weeks (store_id, week, row_count) select store.id, date '2026-06-08' - 7 * n, 60 from stores store, generate_series(0, 159) n
      where store.code like 'T%'`);
    await coverage("?weeks=160");
    const begun = performance.now();
    const { text } = await read(test, "/api/coverage?weeks=160").expect(200);
    const tookMs = performance.now() - begun;
    await test.services.pool.query("delete from stores where code like 'T%'");
    expect(text.length).toBeLessThan(2 * 1024 ** 2);
    expect(tookMs).toBeLessThan(5_000);
  });
});

describe("a worker", () => {
  it("counts what a load left to be counted, also where the load's own job is lost", async () => {
    await load("a.csv", row(june1, "S1"));
    await test.services.pool.query("delete from jobs where kind = 'refresh-coverage'");
    await resumeCoverage(test.services);
    await test.services.queue.work(jobDefinitions, test.services);
    await vi.waitFor(async () => expect((await coverage()).isBehind).toBe(false), { timeout: 10_000, interval: 50 });
    expect(line(await coverage("?weeks=1&until=2026-06-01"), "S1")).toEqual(["there 1 a.csv"]);
    await loaded(test, { name: "b.csv", file: salesFile(row(june8, "S1")) });
    await vi.waitFor(async () => expect(line(await coverage("?weeks=1"), "S1")).toEqual(["there 1 b.csv"]), { timeout: 10_000, interval: 50 });
  });
});
