import type { Pool, PoolClient } from "pg";
import type { Logger } from "../logger";

const retryEveryMs = 100;

/**
 * A lock for each job that this process runs, in PostgreSQL and held by one connection for as long as that lives. A
 * killed process loses its connection and with it the locks, at once and whatever its timers did; a process that is
 * merely too busy to give a sign of life keeps them.
 */
export class JobLocks {
  readonly #pool: Pool;
  readonly #logger: Logger;
  readonly #held = new Map<string, () => void>();
  #connecting: Promise<PoolClient> | undefined;

  constructor(pool: Pool, logger: Logger) {
    this.#pool = pool;
    this.#logger = logger;
  }

  /**
   * Locks a job, waiting at most `patienceMs` for a process that is still letting go of it.
   *
   * @param onLost called when the connection broke, so that the lock is gone
   * @returns whether it is held now
   */
  async take(jobId: string, { onLost, patienceMs }: { onLost: () => void; patienceMs: number }): Promise<boolean> {
    const until = Date.now() + patienceMs;
    for (;;) {
      const client = await this.#client();
      const { rows } = await client.query<{ taken: boolean }>(
        "select pg_try_advisory_lock(hashtextextended($1, 0)) as taken",
        [jobId],
      );
      if (rows[0]?.taken) {
        this.#held.set(jobId, onLost);
        return true;
      }
      if (Date.now() >= until) return false;
      await new Promise((resolve) => setTimeout(resolve, retryEveryMs));
    }
  }

  async release(jobId: string): Promise<void> {
    if (!this.#held.delete(jobId)) return;
    const client = await this.#client();
    await client.query("select pg_advisory_unlock(hashtextextended($1, 0))", [jobId]);
  }

  /** Closes the connection, and so lets go of everything. */
  async close(): Promise<void> {
    const connecting = this.#connecting;
    this.#connecting = undefined;
    this.#held.clear();
    // A connection that could not be made needs no closing.
    const client = await connecting?.catch(() => undefined);
    client?.release(true);
  }

  #client(): Promise<PoolClient> {
    this.#connecting ??= this.#connect();
    return this.#connecting;
  }

  async #connect(): Promise<PoolClient> {
    try {
      const client = await this.#pool.connect();
      client.once("error", (error) => this.#lose(client, error));
      // A machine that vanished does not close its connections: the server is to notice within half a minute.
      await client.query("set tcp_keepalives_idle = 10; set tcp_keepalives_interval = 5; set tcp_keepalives_count = 4");
      return client;
    } catch (error) {
      this.#connecting = undefined;
      throw error;
    }
  }

  #lose(client: PoolClient, error: Error): void {
    if (!this.#connecting) return;
    this.#connecting = undefined;
    this.#logger.warn({ err: error, jobs: [...this.#held.keys()] }, "the connection that holds job locks was lost");
    const lost = [...this.#held.values()];
    this.#held.clear();
    client.release(error);
    for (const onLost of lost) onLost();
  }
}
