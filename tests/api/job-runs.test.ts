import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { JobEntity } from "../../server/features/jobs";
import { enqueue, hasEnded, waitForJob } from "../support/jobs";
import { startTestApp, type TestApp } from "../support/test-app";
import { breakingJob, countingJob, createTrialMarks, marksOf, refusingJob, trialJobs } from "../support/trial-jobs";

let test: TestApp;

beforeAll(async () => {
  test = await startTestApp();
  await createTrialMarks(test.services);
  await test.services.queue.work(trialJobs, test.services);
});
afterAll(() => test.stop());

const givenUp = async (mark: string) => {
  const { rows } = await test.services.pool.query("select 1 from trial_marks where mark = $1", [mark]);
  return rows.length;
};

describe("a job", () => {
  it("runs once, tells how far it is, and keeps its result", async () => {
    const id = await enqueue(test.services, countingJob, { steps: 5, stepMs: 120 }, { subject: "/api/somewhere" });
    const halfway = await waitForJob(test.services, id, (job) => job.done >= 2);
    expect(halfway).toMatchObject({ state: "running", total: 5, attempt: 1, subject: "/api/somewhere" });
    const job = await waitForJob(test.services, id, hasEnded);
    expect(job).toMatchObject({
      state: "succeeded",
      done: 5,
      attempt: 1,
      failures: 0,
      result: { counted: 5 },
      error: null,
      cleanupPending: false,
    });
    expect(await marksOf(test.services, id)).toEqual([
      "begin",
      "step 1",
      "step 2",
      "step 3",
      "step 4",
      "step 5",
      "end",
    ]);
  });

  it("is tried again after it broke down", async () => {
    const id = await enqueue(test.services, breakingJob, { succeedsAtTry: 3 });
    const job = await waitForJob(test.services, id, hasEnded);
    expect(job).toMatchObject({ state: "succeeded", attempt: 3, failures: 2, error: null });
    expect(await marksOf(test.services, id)).toEqual(["begin", "begin", "begin"]);
  });

  it("is given up once no try is left, and says that the reason is not known", async () => {
    const id = await enqueue(test.services, breakingJob, { succeedsAtTry: 1000 });
    const job = await waitForJob(test.services, id, (row) => hasEnded(row) && !row.cleanupPending);
    expect(job).toMatchObject({ state: "failed", attempt: 3, error: { code: "unexpected" } });
    expect(await givenUp("given up 1000 unexpected")).toBe(1);
  });

  it("is not tried again where it met a problem it can name", async () => {
    const id = await enqueue(test.services, refusingJob, { name: "one" });
    const job = await waitForJob(test.services, id, hasEnded);
    expect(job).toMatchObject({
      state: "failed",
      attempt: 1,
      error: { code: "not-usable", detail: "This cannot be used. Send another." },
    });
    expect(await marksOf(test.services, id)).toEqual(["begin"]);
  });

  it("has its subject put right at a second try where the first breaks down", async () => {
    const id = await enqueue(test.services, refusingJob, { name: "two" });
    await waitForJob(test.services, id, (row) => hasEnded(row) && !row.cleanupPending);
    expect(await givenUp("given up two")).toBe(2);
  });
});

describe("adding a job", () => {
  it("needs an open transaction", async () => {
    const em = test.services.orm.em.fork();
    await expect(test.services.queue.enqueue(em, countingJob, { steps: 1, stepMs: 1 })).rejects.toThrow(
      /inside a transaction/,
    );
  });

  it("is refused with a payload that does not fit its kind", async () => {
    const payload = { steps: Number.NaN, stepMs: 1 };
    await expect(enqueue(test.services, countingJob, payload)).rejects.toThrow(/expected number/);
  });

  it("leaves nothing where the transaction is rolled back", async () => {
    const em = test.services.orm.em.fork();
    let id = "";
    await expect(
      em.transactional(async (inner) => {
        id = await test.services.queue.enqueue(inner, countingJob, { steps: 1, stepMs: 1 });
        throw new Error("on second thoughts");
      }),
    ).rejects.toThrow("on second thoughts");
    expect(await em.fork().count(JobEntity, { id })).toBe(0);
    const { rows } = await test.services.pool.query("select 1 from pgboss.job where data->>'jobId' = $1", [id]);
    expect(rows).toEqual([]);
  });

  it("answers the job that waits or runs under the same key, and makes a new one after it has ended", async () => {
    const add = () => enqueue(test.services, countingJob, { steps: 2, stepMs: 100 }, { singletonKey: "only one" });
    const ids = await Promise.all([add(), add(), add()]);
    expect(new Set(ids).size).toBe(1);
    await waitForJob(test.services, ids[0] ?? "", hasEnded);
    expect(await add()).not.toBe(ids[0]);
  });
});
