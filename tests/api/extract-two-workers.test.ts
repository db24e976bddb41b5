import pg from "pg";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { act, checkedDirectly, loadCatalogueDirectly, salesFile, startExtractsApp, storedSales, type ExtractsApp } from "../support/extracts";
import { hasEnded, waitForJob } from "../support/jobs";
import { endProcess, startWholeWorker } from "../support/worker-process";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());

const weeks = Array.from({ length: 12 }, (_, at) => new Date(Date.UTC(2026, 2, 2 + 7 * at)).toISOString().slice(0, 10));
const fileOf = (units: number) => salesFile(...weeks.flatMap((week) => ["S1", "S2", "S3", "S4"].map((store) => `${week},${store},P1,${units},${(units * 1.79).toFixed(2)},1.79,,0,0,none`)));

/** Stands where loads wait for each other, until `release`. */
async function holdLoads() {
  const client = new pg.Client({ connectionString: test.services.environment.DATABASE_URL });
  await client.connect();
  await client.query("begin; select pg_advisory_xact_lock(hashtext('shelftide loads'))");
  return {
    async waiting(): Promise<number> {
      const { rows } = await client.query<{ count: number }>(`
        select count(*)::int as count from pg_locks waiting join pg_locks held
          on held.locktype = 'advisory' and held.granted and held.pid = pg_backend_pid()
          and (held.classid, held.objid, held.objsubid) = (waiting.classid, waiting.objid, waiting.objsubid)
        where waiting.locktype = 'advisory' and not waiting.granted and waiting.database = held.database`);
      return rows[0]?.count ?? 0;
    },
    async release() {
      await client.query("rollback");
      await client.end();
    },
  };
}

describe("two workers that load files with the same rows at the same time", () => {
  it("load them one after the other, so that the sales are one file's, and the other's rows stand in the history", { timeout: 120_000 }, async () => {
    const extracts = [await checkedDirectly(test, { name: "1.csv", file: fileOf(10) }), await checkedDirectly(test, { name: "2.csv", file: fileOf(11) })];
    const hold = await holdLoads();
    const workers = [startWholeWorker(test.services), startWholeWorker(test.services)];
    try {
      const jobs = await Promise.all(extracts.map(async ({ id }) => String((await act(test, `/api/extracts/${id}/load`).expect(202)).body.jobId)));
      await vi.waitFor(async () => expect(await hold.waiting()).toBe(2), { timeout: 60_000, interval: 100 });
      await hold.release();
      const ended = await Promise.all(jobs.map((id) => waitForJob(test.services, id, hasEnded, 60_000)));
      expect(ended.map(({ state, result }) => [state, result])).toEqual(expect.arrayContaining([
        ["succeeded", { new: 48, changed: 0, same: 0, missing: 0 }], ["succeeded", { new: 0, changed: 48, same: 0, missing: 0 }],
      ]));
      const sales = await storedSales(test);
      const [last] = sales;
      expect(sales).toHaveLength(48);
      expect(new Set(sales.map(({ file, units }) => `${file} ${units}`))).toEqual(new Set([last?.file === "1.csv" ? "1.csv 10" : "2.csv 11"]));
      const { rows } = await test.services.pool.query("select distinct extract_id, replaced_by from weekly_sales_history");
      const [first, second] = last?.file === "2.csv" ? extracts : [...extracts].reverse();
      expect(rows).toEqual([{ extract_id: first?.id, replaced_by: second?.id }]);
    } finally {
      for (const worker of workers) await endProcess(worker, "SIGKILL");
    }
  });
});
