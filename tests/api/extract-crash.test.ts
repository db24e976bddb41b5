import { spawn, type ChildProcess } from "node:child_process";
import { fileURLToPath } from "node:url";
import pg from "pg";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import type { Extract } from "@shared/contract/extracts";
import { jobDefinitions } from "../../server/job-definitions";
import { act, checkedDirectly, loadCatalogueDirectly, read, salesFile, startExtractsApp, storedSales, upload, type ExtractsApp } from "../support/extracts";
import { hasEnded, waitForJob } from "../support/jobs";
import { endProcess } from "../support/worker-process";

const script = fileURLToPath(new URL("../../server/worker.ts", import.meta.url));

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());

/** Starts the real worker in a process of its own. */
function startWorker(): ChildProcess {
  const variables = Object.entries(test.services.environment).map(([name, value]) => [name, String(value)]);
  return spawn(process.execPath, ["--import", "tsx", script], {
    env: { PATH: process.env.PATH, AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: "true", ...Object.fromEntries(variables), LOG_LEVEL: "silent" },
    stdio: ["ignore", "ignore", "inherit"],
  });
}

/** Keeps a table from everybody, so that a worker stands still where it comes to it, until `release`. */
async function blockAt(table: string): Promise<{ release: () => Promise<void>; someoneWaits: () => Promise<boolean> }> {
  const client = new pg.Client({ connectionString: test.services.environment.DATABASE_URL });
  await client.connect();
  let isReleased = false;
  await client.query(`begin; lock table ${table} in access exclusive mode`);
  return {
    async someoneWaits() {
      const { rows } = await client.query(`select 1 from pg_locks where relation = '${table}'::regclass and not granted`);
      return rows.length > 0;
    },
    async release() {
      if (isReleased) return;
      isReleased = true;
      await client.query("rollback");
      await client.end();
    },
  };
}

const file = salesFile("2026-06-01,S1,P1,10,17.90,1.79,,0,0,none", "2026-06-01,S9,P1,1,1.79,1.79,,0,0,none", "2026-06-08,S1,P1,12,21.48,1.79,,0,0,none");
const extractOf = async (id: string): Promise<Extract> => (await read(test, `/api/extracts/${id}`).expect(200)).body;

describe("a worker that is killed", () => {
  it("when it has written all rows of a load, but before they count, leaves nothing, and another loads all", { timeout: 180_000 }, async () => {
    const { id } = await checkedDirectly(test, { file });
    // The entry in the audit trail is the last thing a load writes.
    const block = await blockAt("audit_entries");
    const worker = startWorker();
    try {
      const { body } = await act(test, `/api/extracts/${id}/load`).expect(202);
      await vi.waitFor(async () => expect(await block.someoneWaits()).toBe(true), { timeout: 100_000, interval: 50 });
      await endProcess(worker, "SIGKILL");
      expect(await extractOf(id)).toMatchObject({ state: "loading" });
      await block.release();
      expect(await storedSales(test)).toEqual([]);
      await test.services.queue.work(jobDefinitions, test.services);
      expect(await waitForJob(test.services, body.jobId, hasEnded, 60_000)).toMatchObject({ state: "succeeded", attempt: 2, error: null });
      expect(await extractOf(id)).toMatchObject({ state: "loaded", failure: null });
      expect(await storedSales(test)).toHaveLength(2);
    } finally {
      await block.release();
      await endProcess(worker, "SIGKILL");
    }
  });
});

describe("a check whose file the store does not give out", () => {
  it("is given up after some tries, says so, and works when asked for again", { timeout: 60_000 }, async () => {
    const { body } = await upload(test, { file }).expect(202);
    const storage = vi.spyOn(test.services.files, "get").mockRejectedValue(new Error("connect ECONNREFUSED"));
    await waitForJob(test.services, body.jobId, (job) => hasEnded(job) && !job.cleanupPending, 50_000);
    expect(await extractOf(body.id)).toMatchObject({ state: "received", failure: { code: "unexpected" }, may: { check: true, load: false } });
    expect((await read(test, `/api/extracts/${body.id}/original`).expect(503)).body.code).toBe("file-store-unavailable");
    storage.mockRestore();
    const again = await act(test, `/api/extracts/${body.id}/check`).expect(202);
    await waitForJob(test.services, again.body.jobId, hasEnded, 20_000);
    expect(await extractOf(body.id)).toMatchObject({ state: "checked", failure: null, rows: { read: 3, usable: 2, errors: 1, warnings: 0 } });
  });
});
