import { setTimeout as sleep } from "node:timers/promises";
import type pg from "pg";

/** What the database was seen doing for a statement: at work itself, or waiting for the program that sends or reads. */
export type StatementTime = { statement: string; workingMs: number; waitingMs: number };

const everyMs = 50;

/** Looks again and again at what statements run in this database, so that a bench can tell where the time goes. */
export class StatementSamples {
  readonly #seen = new Map<string, StatementTime>();
  #isWanted = true;
  readonly #ended: Promise<void>;

  constructor(pool: pg.Pool) {
    this.#ended = this.#run(pool);
  }

  /** Stops looking; what took longest comes first, without what took less than so many milliseconds. */
  async stop({ leastMs }: { leastMs: number }): Promise<StatementTime[]> {
    this.#isWanted = false;
    await this.#ended;
    const total = ({ workingMs, waitingMs }: StatementTime) => workingMs + waitingMs;
    return [...this.#seen.values()].filter((time) => total(time) >= leastMs).sort((one, other) => total(other) - total(one));
  }

  async #run(pool: pg.Pool): Promise<void> {
    let last = performance.now();
    while (this.#isWanted) {
      const { rows } = await pool.query<{ query: string; waits: boolean }>(
        `select query, coalesce(wait_event_type = 'Client', false) as waits from pg_stat_activity
         where datname = current_database() and pid <> pg_backend_pid() and state = 'active' and backend_type = 'client backend'`,
      );
      const now = performance.now();
      for (const { query, waits } of rows) this.#add(shortened(query), waits, now - last);
      last = now;
      await sleep(everyMs);
    }
  }

  #add(statement: string, waits: boolean, ms: number): void {
    const time = this.#seen.get(statement) ?? { statement, workingMs: 0, waitingMs: 0 };
    this.#seen.set(statement, time);
    if (waits) time.waitingMs += ms;
    else time.workingMs += ms;
  }
}

const shortened = (query: string) => query.replace(/rows_[0-9a-f]{32}/g, "rows").replace(/\s+/g, " ").trim().slice(0, 110);
