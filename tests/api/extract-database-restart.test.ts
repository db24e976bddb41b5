import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from "vitest";
import type { Extract } from "@shared/contract/extracts";
import { barrierAt } from "../support/faults/barrier";
import { startFaultyStore, type FaultyStore } from "../support/faults/faulty-store";
import { startOwnCluster, type OwnCluster } from "../support/faults/own-cluster";
import { whileWorking } from "../support/faults/real-worker";
import { act, checkedDirectly, loadCatalogueDirectly, read, salesFile, startExtractsApp, storedSales, upload, type ExtractsApp } from "../support/extracts";

let cluster: OwnCluster;
let store: FaultyStore;
let test: ExtractsApp;

beforeAll(async () => {
  [cluster, store] = await Promise.all([startOwnCluster(), startFaultyStore(process.env.TEST_S3_ENDPOINT ?? "")]);
  vi.stubEnv("TEST_DATABASE_URL", cluster.url);
  vi.stubEnv("TEST_S3_ENDPOINT", store.url);
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
  await test.services.pool.query("select ensure_sales_partition(2026)");
}, 120_000);
afterAll(async () => {
  await test.stop();
  await Promise.all([store.close(), cluster.remove()]);
});
afterEach(() => store.recover());

const patience = { timeout: 90_000, interval: 100 };
/** Right after a restart a connection of before may be tried once more. */
const extractOf = (id: string): Promise<Extract> => vi.waitFor(async () => (await read(test, `/api/extracts/${id}`).expect(200)).body as Extract, patience);
const becomes = (id: string, state: Extract["state"]) => vi.waitFor(async () => expect(await extractOf(id)).toMatchObject({ state, failure: null }), patience);
const sale = (week: string, store: string) => `${week},${store},P1,10,17.90,1.79,,0,0,none`;
const staged = async () => (await test.services.pool.query("select 1 from pg_tables where schemaname = 'staging'")).rows.length;

describe("a database server that breaks down", { timeout: 240_000 }, () => {
  it("while a file is read has it checked anew once it is there again", async () => {
    const rows = Array.from({ length: 4_000 }, (_, at) => sale("2026-06-01", at < 4 ? `S${at + 1}` : "S9"));
    const { body } = await upload(test, { file: salesFile(...rows) }).expect(202);
    store.stallAfter(100_000);
    await whileWorking(test.services, async () => {
      await vi.waitFor(() => expect(store.isStalling()).toBe(true), patience);
      await cluster.breakDown();
      expect(await extractOf(body.id)).toMatchObject({ state: "checking", rows: null });
      await store.recover();
      await becomes(body.id, "checked");
    });
    expect(await extractOf(body.id)).toMatchObject({ rows: { read: 4_000, usable: 4 } });
  });

  it("in the middle of a load leaves nothing loaded, and then all, though the rows that were ready are gone", async () => {
    const { id } = await checkedDirectly(test, { name: "a.csv", file: salesFile(sale("2026-06-01", "S1"), sale("2026-06-08", "S1"), sale("2026-06-08", "S9")) });
    const before = await storedSales(test);
    await act(test, `/api/extracts/${id}/load`).expect(202);
    const wall = await barrierAt(test.services.environment.DATABASE_URL, { table: "audit_entries", mode: "access exclusive" });
    await whileWorking(test.services, async () => {
      await vi.waitFor(async () => expect(await wall.someoneWaits()).toBe(true), patience);
      await cluster.breakDown();
      expect(await extractOf(id)).toMatchObject({ state: "loading", loadedAt: null });
      await becomes(id, "loaded");
    });
    await wall.lift();
    expect(await storedSales(test)).toHaveLength(before.length + 2);
    // The other file's rows wait, emptied; those of the one that is loaded are not needed any more.
    expect(await staged()).toBe(1);
  });
});
