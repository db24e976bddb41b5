import type { ChildProcess } from "node:child_process";
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import type { Extract } from "@shared/contract/extracts";
import { loadExtract } from "../../server/features/extracts";
import { JobEntity } from "../../server/features/jobs";
import { barrierAt, barrierAtSuccess, type Barrier } from "../support/faults/barrier";
import { startFaultyStore, type FaultyStore } from "../support/faults/faulty-store";
import { whileWorking, withSuccessor } from "../support/faults/real-worker";
import { act, checkedDirectly, loadCatalogueDirectly, read, salesFile, startExtractsApp, storedSales, upload, type ExtractsApp } from "../support/extracts";
import { hasEnded, waitForJob } from "../support/jobs";
import { endProcess } from "../support/worker-process";

let test: ExtractsApp;
let store: FaultyStore;

beforeAll(async () => {
  const storeUrl = process.env.TEST_S3_ENDPOINT ?? "";
  store = await startFaultyStore(storeUrl);
  vi.stubEnv("TEST_S3_ENDPOINT", store.url);
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
});
afterAll(async () => {
  await test.stop();
  await store.close();
});

let barriers: Barrier[] = [];
beforeEach(async () => {
  await test.services.pool.query("truncate weekly_sales, weekly_sales_history, sales_confirmations, store_weeks");
  // The partition is there, so that a load takes no other lock than that of its rows.
  await test.services.pool.query("select ensure_sales_partition(2026)");
});
afterEach(async () => {
  await Promise.all(barriers.map((barrier) => barrier.lift()));
  barriers = [];
  await store.recover();
  await test.services.pool.query("update jobs set state = 'cancelled', finished_at = now() where state in ('queued', 'running')");
});

const barrier = async (table: string, mode: "share" | "access exclusive") => {
  const made = await barrierAt(test.services.environment.DATABASE_URL, { table, mode });
  barriers.push(made);
  return made;
};
const patience = { timeout: 60_000, interval: 50 };
const extractOf = async (id: string): Promise<Extract> => (await read(test, `/api/extracts/${id}`).expect(200)).body;
const jobOf = (id: string) => test.services.orm.em.fork().findOneOrFail(JobEntity, { id });
const ended = (jobId: string) => waitForJob(test.services, jobId, (job) => hasEnded(job) && !job.cleanupPending, 60_000);
const succeed = (run: () => Promise<void>) => withSuccessor(test.services, run);

const sale = (week: string, store: string, units = 10) => `${week},${store},P1,${units},${(units * 1.79).toFixed(2)},1.79,,0,0,none`;
const weeks = ["2026-05-25", "2026-06-01", "2026-06-08"];
const file = salesFile(...weeks.map((week) => sale(week, "S1")), sale("2026-06-08", "S9"));
/** Long enough to arrive in several pieces. */
const longFile = salesFile(...Array.from({ length: 4_000 }, (_, at) => sale(weeks[at % 3] ?? "", `S${1 + (at % 4)}`, 1)).map((row, at) => (at < 12 ? row : row.replace(/S\d/, "S9"))));

/** Kills the worker once it stands still where it is expected to. */
async function killAt(worker: ChildProcess, isThere: () => Promise<boolean>): Promise<void> {
  await vi.waitFor(async () => expect(await isThere()).toBe(true), patience);
  await endProcess(worker, "SIGKILL");
}

/** What is loaded of each store, in words. */
const loadedSales = async () => (await storedSales(test)).map(({ week, store: code, units, file: name }) => `${week} ${code} ${units} ${name}`);

/** The picture of store by week agrees with the rows that are there. */
async function expectCounted(): Promise<void> {
  await vi.waitFor(async () => expect((await read(test, "/api/coverage")).body.isBehind).toBe(false), patience);
  const { rows } = await test.services.pool.query(`
    select 1 from (select * from store_weeks where row_count > 0) counted
    full join (select store_id, week, count(*) as row_count from weekly_sales group by 1, 2) stored using (store_id, week)
    where counted.row_count is distinct from stored.row_count`);
  expect(rows).toEqual([]);
}

describe("a worker that is killed (kill -9)", { timeout: 150_000 }, () => {
  it("in the middle of reading a file leaves it being checked, with no row staged, and another checks it wholly", async () => {
    const { body } = await upload(test, { file: longFile }).expect(202);
    store.stallAfter(100_000);
    await whileWorking(test.services, (worker) => killAt(worker, async () => store.isStalling()));
    expect(await extractOf(body.id)).toMatchObject({ state: "checking", rows: null, may: { load: false } });
    expect((await test.services.pool.query("select 1 from pg_tables where schemaname = 'staging'")).rows).toEqual([]);
    await store.recover();
    await succeed(async () => {
      expect(await ended(body.jobId)).toMatchObject({ state: "succeeded", attempt: 2 });
    });
    expect(await extractOf(body.id)).toMatchObject({ state: "checked", failure: null, rows: { read: 4_000, errors: 3_988 } });
  });

  it("when it compares rows with what is there leaves the file being checked, and another checks it", async () => {
    const { body } = await upload(test, { file }).expect(202);
    const wall = await barrier("weekly_sales", "access exclusive");
    await whileWorking(test.services, (worker) => killAt(worker, wall.someoneWaits));
    expect(await extractOf(body.id)).toMatchObject({ state: "checking", rows: null });
    await wall.lift();
    await succeed(async () => {
      expect(await ended(body.jobId)).toMatchObject({ state: "succeeded", attempt: 2 });
    });
    expect(await extractOf(body.id)).toMatchObject({ state: "checked", failure: null, rows: { read: 4, usable: 3, errors: 1 } });
  });

  it.each([
    ["before the first row is written", "weekly_sales", "share"],
    // The entry in the audit trail is written after all rows.
    ["when all rows are written, but do not count yet", "audit_entries", "access exclusive"],
  ] as const)("in a load, %s, leaves nothing loaded, and another loads all", async (_when, table, mode) => {
    const { id } = await checkedDirectly(test, { name: "a.csv", file });
    const { body } = await act(test, `/api/extracts/${id}/load`).expect(202);
    const wall = await barrier(table, mode);
    await whileWorking(test.services, (worker) => killAt(worker, wall.someoneWaits));
    expect(await extractOf(id)).toMatchObject({ state: "loading", loadedAt: null });
    await wall.lift();
    expect(await loadedSales()).toEqual([]);
    await succeed(async () => {
      expect(await ended(body.jobId)).toMatchObject({ state: "succeeded", attempt: 2, error: null });
      await expectCounted();
    });
    expect(await extractOf(id)).toMatchObject({ state: "loaded", failure: null });
    expect(await loadedSales()).toEqual(weeks.map((week) => `${week} S1 10 a.csv`));
  });

  it("when a load counts, but its job does not say so yet, has it said by another, which changes nothing", async () => {
    const { id } = await checkedDirectly(test, { name: "a.csv", file });
    const { body } = await act(test, `/api/extracts/${id}/load`).expect(202);
    const wall = await barrierAtSuccess(test.services.environment.DATABASE_URL, "load-extract");
    barriers.push(wall);
    await whileWorking(test.services, (worker) => killAt(worker, wall.someoneWaits));
    await wall.lift();
    expect(await extractOf(id)).toMatchObject({ state: "loaded" });
    expect(await jobOf(body.jobId)).toMatchObject({ state: "running" });
    const loaded = await loadedSales();
    expect(loaded).toHaveLength(3);
    await succeed(async () => {
      expect(await ended(body.jobId)).toMatchObject({ state: "succeeded", attempt: 2, result: { new: 3, changed: 0, same: 0 } });
      await expectCounted();
    });
    expect(await loadedSales()).toEqual(loaded);
    const { rows } = await test.services.pool.query("select 1 from audit_entries where action = 'extract.loaded' and subject_id = $1", [id]);
    expect(rows).toHaveLength(1);
  });

  it("in a withdrawal leaves all as loaded, and another puts back all that was there before", async () => {
    const first = await checkedDirectly(test, { name: "first.csv", file: salesFile(sale("2026-06-01", "S1", 4)) });
    await loadExtract(test.services, { extractId: first.id });
    const { id } = await checkedDirectly(test, { name: "second.csv", file });
    await loadExtract(test.services, { extractId: id, seen: "everything" });
    const loaded = await loadedSales();
    const { body } = await act(test, `/api/extracts/${id}/withdraw`).expect(202);
    const wall = await barrier("audit_entries", "access exclusive");
    await whileWorking(test.services, (worker) => killAt(worker, wall.someoneWaits));
    await wall.lift();
    expect(await extractOf(id)).toMatchObject({ state: "loaded" });
    expect(await loadedSales()).toEqual(loaded);
    await succeed(async () => {
      expect(await ended(body.jobId)).toMatchObject({ state: "succeeded", error: null });
      await expectCounted();
    });
    expect(await extractOf(id)).toMatchObject({ state: "withdrawn", failure: null });
    expect(await loadedSales()).toEqual(["2026-06-01 S1 4 first.csv"]);
  });

  it("when it counts what is loaded of each store leaves the picture behind, and another brings it up to date", async () => {
    const { id } = await checkedDirectly(test, { name: "a.csv", file });
    await loadExtract(test.services, { extractId: id });
    const wall = await barrier("store_weeks", "share");
    await whileWorking(test.services, (worker) => killAt(worker, wall.someoneWaits));
    await wall.lift();
    expect((await read(test, "/api/coverage").expect(200)).body.isBehind).toBe(true);
    await succeed(expectCounted);
    expect((await test.services.pool.query("select count(*)::int as count from store_weeks")).rows).toEqual([{ count: 3 }]);
  });
});

describe("a file store that is down", { timeout: 120_000 }, () => {
  const down = { code: "file-store-unavailable", detail: expect.stringContaining("The file store does not answer") };

  it("at an upload is told to who uploads, and leaves no extract behind", async () => {
    const before = (await read(test, "/api/extracts").expect(200)).body.items.length;
    await store.goDown();
    const { body } = await upload(test, { file }).expect(503);
    expect(body).toMatchObject({ code: "file-store-unavailable", detail: "The file could not be kept. Nothing was stored; try again in a minute." });
    expect((await read(test, "/api/extracts").expect(200)).body.items).toHaveLength(before);
    await store.recover();
    await upload(test, { file }).expect(202);
  });

  it("at a check is tried again some times, said in words with the extract, and checked when asked for again", async () => {
    const { body } = await upload(test, { file }).expect(202);
    await store.goDown();
    await succeed(async () => {
      expect(await ended(body.jobId)).toMatchObject({ state: "failed", attempt: 3, error: down });
      expect(await extractOf(body.id)).toMatchObject({ state: "received", rows: null, failure: down, may: { check: true, load: false } });
      expect((await read(test, `/api/extracts/${body.id}/original`).expect(503)).body.code).toBe("file-store-unavailable");
      await store.recover();
      const again = await act(test, `/api/extracts/${body.id}/check`).expect(202);
      expect(await ended(again.body.jobId)).toMatchObject({ state: "succeeded" });
    });
    expect(await extractOf(body.id)).toMatchObject({ state: "checked", failure: null, rows: { read: 4, usable: 3 } });
  });

  it("in the middle of a check makes it begin anew", async () => {
    const { body } = await upload(test, { file: longFile }).expect(202);
    store.stallAfter(100_000);
    await succeed(async () => {
      await vi.waitFor(() => expect(store.isStalling()).toBe(true), patience);
      await store.goDown();
      await store.recover();
      expect(await ended(body.jobId)).toMatchObject({ state: "succeeded", failures: 1 });
    });
    expect(await extractOf(body.id)).toMatchObject({ state: "checked", rows: { read: 4_000, errors: 3_988 } });
  });

  it("at a load does not matter while the checked rows wait", async () => {
    const { id } = await checkedDirectly(test, { name: "a.csv", file });
    const { body } = await act(test, `/api/extracts/${id}/load`).expect(202);
    await store.goDown();
    await succeed(async () => expect(await ended(body.jobId)).toMatchObject({ state: "succeeded" }));
    expect(await loadedSales()).toHaveLength(3);
  });

  it("at a load whose rows must be read again leaves nothing loaded and says so, and a later load takes all", async () => {
    const { id } = await checkedDirectly(test, { name: "a.csv", file });
    // What is left of an unlogged table after the database server broke down.
    await test.services.pool.query(`truncate staging."rows_${id.replaceAll("-", "")}"`);
    const { body } = await act(test, `/api/extracts/${id}/load`).expect(202);
    await store.goDown();
    await succeed(async () => {
      expect(await ended(body.jobId)).toMatchObject({ state: "failed", attempt: 3, error: down });
      expect(await extractOf(id)).toMatchObject({ state: "checked", failure: down, may: { load: true } });
      expect(await loadedSales()).toEqual([]);
      await store.recover();
      const again = await act(test, `/api/extracts/${id}/load`).expect(202);
      expect(await ended(again.body.jobId)).toMatchObject({ state: "succeeded" });
    });
    expect(await extractOf(id)).toMatchObject({ state: "loaded", failure: null });
    expect(await loadedSales()).toEqual(weeks.map((week) => `${week} S1 10 a.csv`));
  });
});
