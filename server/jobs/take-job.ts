import type PgBoss from "pg-boss";
import type { Pool } from "pg";
import type { TakenJob } from "./job-lease";
import type { QueuedJob } from "./pg-boss-queue";

export type Taken = { job: TakenJob } | "nothing to do" | "no longer wanted";

/**
 * Takes the next waiting job of a kind: its message leaves the queue and its row says "running" in one transaction, so
 * that a worker killed here leaves either a waiting job with its message or a running one that can be rescued.
 */
export async function takeJob({ boss, pool, kind }: { boss: PgBoss; pool: Pool; kind: string }): Promise<Taken> {
  const client = await pool.connect();
  const db = { executeSql: (text: string, values: unknown[]) => client.query(text, values) };
  try {
    await client.query("begin");
    const [message] = await boss.fetch<QueuedJob>(kind, { db });
    if (!message) {
      await client.query("commit");
      return "nothing to do";
    }
    // The attempt tells a message that counts from one of an earlier try.
    const { rows } = await client.query<TakenJob>(
      `update jobs set state = 'running', attempt = attempt + 1, heartbeat_at = now(), started_at = coalesce(started_at, now())
       where id = $1 and attempt = $2 and state = 'queued' returning id, kind, attempt, failures, payload`,
      [message.data.jobId, message.data.attempt],
    );
    await boss.deleteJob(kind, message.id, { db });
    await client.query("commit");
    return rows[0] ? { job: rows[0] } : "no longer wanted";
  } catch (error) {
    await client.query("rollback").catch(() => undefined);
    throw error;
  } finally {
    client.release();
  }
}
