import { setTimeout as sleep } from "node:timers/promises";
import { z } from "zod";
import { ProblemError } from "../../server/errors";
import { defineJob, type JobContext } from "../../server/jobs/job-queue";
import type { JobTiming } from "../../server/jobs/job-runner";
import type { Services } from "../../server/services";

/** As in earnest, but quicker. */
export const trialTiming: JobTiming = { silentAfterSeconds: 3, rescueEveryMs: 1_000, stopPatienceMs: 3_000 };

/** Jobs whose doings can be read in the table `trial_marks`, by whichever process they ran in. */
export async function createTrialMarks({ pool }: Services): Promise<void> {
  await pool.query(
    "create table trial_marks (id bigserial primary key, job uuid, process integer, mark text, at timestamptz default clock_timestamp())",
  );
}

export async function marksOf({ pool }: Services, job: string): Promise<string[]> {
  const { rows } = await pool.query<{ mark: string }>("select mark from trial_marks where job = $1 order by id", [job]);
  return rows.map(({ mark }) => mark);
}

async function leaveMark(
  { services, jobId }: Pick<JobContext<unknown>, "services" | "jobId">,
  mark: string,
): Promise<void> {
  await services.pool.query("insert into trial_marks (job, process, mark) values ($1, $2, $3)", [
    jobId,
    process.pid,
    mark,
  ]);
}

/** Says so where two processes do the same thing at once: both need one lock of the database. */
async function alone<Result>(
  { services, jobId }: Pick<JobContext<unknown>, "services" | "jobId">,
  work: () => Promise<Result>,
): Promise<Result> {
  const client = await services.pool.connect();
  try {
    const { rows } = await client.query<{ free: boolean }>("select pg_try_advisory_lock(4711, hashtext($1)) as free", [
      jobId,
    ]);
    if (!rows[0]?.free) await leaveMark({ services, jobId }, "two at once");
    return await work();
  } finally {
    // Closes the connection, and so gives the lock back.
    client.release(true);
  }
}

/** Counts to `steps`, and leaves a mark at each. */
export const countingJob = defineJob({
  kind: "trial.counting",
  payload: z.object({ steps: z.number(), stepMs: z.number() }),
  async run(context) {
    const { steps, stepMs } = context.payload;
    await leaveMark(context, "begin");
    await alone(context, async () => {
      for (let done = 1; done <= steps; done += 1) {
        await sleep(stepMs);
        await leaveMark(context, `step ${done}`);
        await context.progress({ done, total: steps, message: `Step ${done}` });
      }
    });
    await leaveMark(context, "end");
    return { counted: steps };
  },
  async onGivenUp({ payload, services, error }) {
    await services.pool.query("insert into trial_marks (mark) values ($1)", [
      `given up ${payload.steps} ${error.code}`,
    ]);
  },
});

/** The same for jobs that are given up as soon as one worker is lost. */
export const onceOnlyJob = defineJob({ ...countingJob, kind: "trial.once-only", retryLimit: 0 });

/** Breaks down until it has begun often enough. */
export const breakingJob = defineJob({
  kind: "trial.breaking",
  payload: z.object({ succeedsAtTry: z.number() }),
  retryLimit: 2,
  retryDelaysSeconds: [0],
  async run(context) {
    await leaveMark(context, "begin");
    const begun = (await marksOf(context.services, context.jobId)).length;
    if (begun < context.payload.succeedsAtTry) throw new Error("broken on purpose");
  },
  async onGivenUp({ services, error, payload }) {
    await services.pool.query("insert into trial_marks (mark) values ($1)", [
      `given up ${payload.succeedsAtTry} ${error.code}`,
    ]);
  },
});

/** Meets a problem that it can name, and leaves something that cannot be put right at the first try. */
export const refusingJob = defineJob({
  kind: "trial.refusing",
  payload: z.object({ name: z.string() }),
  async run(context) {
    await leaveMark(context, "begin");
    throw new ProblemError({ status: 422, code: "not-usable", detail: "This cannot be used. Send another." });
  },
  async onGivenUp({ services, payload }) {
    await services.pool.query("insert into trial_marks (mark) values ($1)", [`given up ${payload.name}`]);
    const { rowCount } = await services.pool.query("select 1 from trial_marks where mark = $1", [
      `given up ${payload.name}`,
    ]);
    if (rowCount === 1) throw new Error("broken on purpose");
  },
});

/** Computes without a pause, so that its process can give no sign of life. */
export const busyJob = defineJob({
  kind: "trial.busy",
  payload: z.object({ ms: z.number() }),
  async run(context) {
    await leaveMark(context, "begin");
    await alone(context, async () => {
      const until = Date.now() + context.payload.ms;
      let rounds = 0;
      while (Date.now() < until) rounds += 1;
      return rounds;
    });
    await leaveMark(context, "end");
  },
});

export const trialJobs = [countingJob, onceOnlyJob, breakingJob, refusingJob, busyJob];
