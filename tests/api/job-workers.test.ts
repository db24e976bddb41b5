import type { ChildProcess } from "node:child_process";
import { afterAll, afterEach, beforeAll, describe, expect, it } from "vitest";
import { closeServices, createServices } from "../../server/create-services";
import type { Services } from "../../server/services";
import { enqueue, hasEnded, waitForJob } from "../support/jobs";
import { startTestApp, type TestApp } from "../support/test-app";
import {
  busyJob,
  countingJob,
  createTrialMarks,
  marksOf,
  onceOnlyJob,
  trialJobs,
  trialTiming,
} from "../support/trial-jobs";
import { endProcess, startWorkerProcess } from "../support/worker-process";

let test: TestApp;
const processes: ChildProcess[] = [];
const workersHere: Services[] = [];

beforeAll(async () => {
  test = await startTestApp();
  await createTrialMarks(test.services);
});
afterEach(async () => {
  await Promise.all(processes.splice(0).map((child) => endProcess(child, "SIGKILL")));
  await Promise.all(workersHere.splice(0).map(closeServices));
});
afterAll(() => test.stop());

async function startWorker(): Promise<ChildProcess> {
  const child = await startWorkerProcess(test.services);
  processes.push(child);
  return child;
}

async function startWorkerHere(): Promise<Services> {
  const services = await createServices(test.services.environment, { jobTiming: trialTiming });
  await services.queue.work(trialJobs, services);
  workersHere.push(services);
  return services;
}

const begins = (marks: string[]) => marks.filter((mark) => mark === "begin").length;

describe("a worker that is killed", () => {
  it("loses its job to another, which runs it to its end", { timeout: 120_000 }, async () => {
    const killed = await startWorker();
    const id = await enqueue(test.services, countingJob, { steps: 6, stepMs: 200 });
    await waitForJob(test.services, id, (job) => job.done >= 2);
    await endProcess(killed, "SIGKILL");
    expect(await waitForJob(test.services, id, () => true)).toMatchObject({ state: "running", attempt: 1 });
    await startWorkerHere();
    const job = await waitForJob(test.services, id, hasEnded, 40_000);
    expect(job).toMatchObject({ state: "succeeded", attempt: 2, failures: 1, result: { counted: 6 } });
    const marks = await marksOf(test.services, id);
    expect(begins(marks)).toBe(2);
    expect(marks).not.toContain("two at once");
  });

  it("has its job given up where no try is left", { timeout: 120_000 }, async () => {
    const killed = await startWorker();
    const id = await enqueue(test.services, onceOnlyJob, { steps: 100, stepMs: 200 });
    await waitForJob(test.services, id, (job) => job.done >= 1);
    await endProcess(killed, "SIGKILL");
    await startWorkerHere();
    const job = await waitForJob(test.services, id, (row) => hasEnded(row) && !row.cleanupPending, 40_000);
    expect(job).toMatchObject({ state: "failed", attempt: 1, error: { code: "worker-lost" } });
    const { rows } = await test.services.pool.query("select mark from trial_marks where mark like 'given up 100 %'");
    expect(rows).toEqual([{ mark: "given up 100 worker-lost" }]);
  });
});

describe("a worker that is told to stop", () => {
  it("ends in seconds and hands its job on, which counts as no failure", { timeout: 120_000 }, async () => {
    const stopped = await startWorker();
    const id = await enqueue(test.services, countingJob, { steps: 60, stepMs: 150 });
    await waitForJob(test.services, id, (job) => job.done >= 2);
    await startWorkerHere();
    const began = Date.now();
    await endProcess(stopped, "SIGTERM");
    expect(Date.now() - began).toBeLessThan(7_000);
    expect(stopped.exitCode).toBe(0);
    const job = await waitForJob(test.services, id, (row) => row.attempt === 2, 15_000);
    expect(job).toMatchObject({ failures: 0 });
    const end = await waitForJob(test.services, id, hasEnded);
    expect(end).toMatchObject({ state: "succeeded", attempt: 2, failures: 0 });
    expect(await marksOf(test.services, id)).not.toContain("two at once");
  });

  it("lets a short job end by itself", { timeout: 120_000 }, async () => {
    const stopped = await startWorker();
    const id = await enqueue(test.services, countingJob, { steps: 3, stepMs: 250 });
    await waitForJob(test.services, id, (job) => job.done >= 1);
    await endProcess(stopped, "SIGTERM");
    expect(await waitForJob(test.services, id, hasEnded, 100)).toMatchObject({ state: "succeeded", attempt: 1 });
  });
});

describe("several workers", () => {
  it("run each of many jobs exactly once", { timeout: 120_000 }, async () => {
    await Promise.all([startWorkerHere(), startWorkerHere(), startWorkerHere()]);
    const ids = await Promise.all(
      Array.from({ length: 40 }, () => enqueue(test.services, countingJob, { steps: 1, stepMs: 5 })),
    );
    for (const id of ids) await waitForJob(test.services, id, hasEnded, 60_000);
    const { rows } = await test.services.pool.query<{ begins: number }>(
      "select count(*)::int as begins from trial_marks where mark = 'begin' and job = any($1) group by job",
      [ids],
    );
    expect(rows.map((row) => row.begins)).toEqual(ids.map(() => 1));
  });

  it("leave a job to a worker that is too busy to give a sign of life", { timeout: 120_000 }, async () => {
    await startWorker();
    const id = await enqueue(test.services, busyJob, { ms: 6_000 });
    await waitForJob(test.services, id, (job) => job.state === "running");
    await startWorkerHere();
    const job = await waitForJob(test.services, id, hasEnded, 60_000);
    expect(job).toMatchObject({ state: "succeeded", attempt: 1 });
    expect(await marksOf(test.services, id)).toEqual(["begin", "end"]);
  });

  it("run a job again whose worker lost the connection that holds its lock", { timeout: 120_000 }, async () => {
    await startWorkerHere();
    const id = await enqueue(test.services, countingJob, { steps: 20, stepMs: 100 });
    await waitForJob(test.services, id, (job) => job.done >= 2);
    await test.services.pool.query(
      `select pg_terminate_backend(pid) from pg_locks
       where locktype = 'advisory' and database = (select oid from pg_database where datname = current_database()) and pid <> pg_backend_pid()`,
    );
    const job = await waitForJob(test.services, id, hasEnded, 60_000);
    expect(job).toMatchObject({ state: "succeeded", attempt: 2, failures: 1 });
    expect(await marksOf(test.services, id)).not.toContain("two at once");
  });
});

describe("a process with few connections", () => {
  it("makes a queue by the only one that is free", { timeout: 30_000 }, async () => {
    const services = await createServices({ ...test.services.environment, DATABASE_POOL_SIZE: 2 });
    workersHere.push(services);
    const held = await services.pool.connect();
    try {
      const id = await enqueue(services, countingJob, { steps: 1, stepMs: 1 });
      expect(await waitForJob(services, id, () => true)).toMatchObject({ state: "queued" });
    } finally {
      held.release();
    }
  });
});
