import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { JobSignals, signalJob } from "../../server/jobs/job-signals";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let signals: JobSignals;
const never = new AbortController().signal;
const longMs = 60_000;

beforeAll(async () => {
  test = await startTestApp();
  signals = new JobSignals(test.services.environment.DATABASE_URL, test.services.logger);
  await signals.open();
});
afterAll(async () => {
  await signals.close();
  await test.stop();
});

const signal = (kind: string) => test.services.orm.em.fork().transactional((em) => signalJob(em, kind));
/** Pids of connections that listen. */
const listeners = async () => {
  const { rows } = await test.services.pool.query<{ pid: number }>("select pid from pg_stat_activity where datname = current_database() and query like 'listen %'");
  return rows.map(({ pid }) => pid);
};

describe("a worker that waits for jobs", () => {
  it("is woken by a job of its kind once the transaction is committed, and not by others", async () => {
    let isWoken = false;
    const waiting = signals.wait("one", longMs, never).then(() => { isWoken = true; });
    await signal("other");
    await test.services.orm.em.fork().transactional(async (em) => {
      await signalJob(em, "one");
      await test.services.pool.query("select 1");
      expect(isWoken).toBe(false);
    });
    await waiting;
  });

  it("does not wait where it was signalled since the last time, and waits again then", async () => {
    await signal("late");
    // Signals arrive in the order they were sent.
    const marker = signals.wait("marker", longMs, never);
    await signal("marker");
    await marker;
    await signals.wait("late", longMs, never);
    const stopping = new AbortController();
    const waiting = signals.wait("late", longMs, stopping.signal);
    stopping.abort();
    await waiting;
  });

  it("is not woken by what was rolled back, and looks by itself after a while", async () => {
    await test.services.orm.em.fork().transactional(async (em) => {
      await signalJob(em, "gone");
      throw new Error("on second thoughts");
    }).catch(() => undefined);
    const begun = performance.now();
    await signals.wait("gone", 200, never);
    expect(performance.now() - begun).toBeGreaterThan(150);
  });

  it("hears again after its connection broke", { timeout: 20_000 }, async () => {
    const [before] = await listeners();
    await test.services.pool.query("select pg_terminate_backend($1)", [before]);
    await vi.waitFor(async () => {
      const [now] = await listeners();
      expect(now).toBeDefined();
      expect(now).not.toBe(before);
    }, { timeout: 15_000, interval: 100 });
    const waiting = signals.wait("again", longMs, never);
    await signal("again");
    await waiting;
  });
});
