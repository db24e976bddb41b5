import type { EntityManager } from "@mikro-orm/postgresql";
import { setTimeout as sleep } from "node:timers/promises";
import pg from "pg";
import type { Logger } from "../logger";

const channel = "shelftide_jobs";
const reconnectAfterMs = 5_000;

/** Tells workers, once the context's transaction is committed, that a job of a kind waits. */
export async function signalJob(em: EntityManager, kind: string): Promise<void> {
  await em.execute("select pg_notify(?, ?)", [channel, kind]);
}

/**
 * Hears that jobs wait, so that a worker need not look for them all the time to take them at once. Only a signal: what is
 * missed, for example while the connection is broken, is found by looking now and then.
 */
export class JobSignals {
  readonly #databaseUrl: string;
  readonly #logger: Logger;
  readonly #missed = new Set<string>();
  readonly #waiting = new Map<string, AbortController>();
  readonly #closing = new AbortController();
  #client: pg.Client | undefined;

  constructor(databaseUrl: string, logger: Logger) {
    this.#databaseUrl = databaseUrl;
    this.#logger = logger;
  }

  /** Begins to hear, now or as soon as the database answers. */
  async open(): Promise<void> {
    const client = new pg.Client({ connectionString: this.#databaseUrl });
    client.on("notification", ({ payload = "" }) => this.#hear(payload));
    client.on("error", (error) => void this.#lost(client, error));
    try {
      await client.connect();
      await client.query(`listen ${channel}`);
      this.#client = client;
      if (this.#closing.signal.aborted) await this.close();
    } catch (error) {
      void this.#lost(client, error);
    }
  }

  /** Waits until a job of the kind is signalled, or so long at most; not at all where one was since the last time. */
  async wait(kind: string, mostMs: number, stopping: AbortSignal): Promise<void> {
    if (this.#missed.delete(kind)) return;
    if (stopping.aborted) return;
    const woken = new AbortController();
    const stop = () => woken.abort();
    // Not AbortSignal.any: `stopping` lives as long as the worker and would keep a trace of each wait.
    stopping.addEventListener("abort", stop);
    this.#waiting.set(kind, woken);
    // Ended early by a signal or the stop, which reject.
    await sleep(mostMs, undefined, { signal: woken.signal }).catch(() => undefined);
    this.#waiting.delete(kind);
    stopping.removeEventListener("abort", stop);
  }

  async close(): Promise<void> {
    this.#closing.abort();
    const client = this.#client;
    this.#client = undefined;
    await client?.end().catch(() => undefined);
  }

  #hear(kind: string): void {
    const waiting = this.#waiting.get(kind);
    if (waiting) waiting.abort();
    else this.#missed.add(kind);
  }

  async #lost(client: pg.Client, error: unknown): Promise<void> {
    if (this.#closing.signal.aborted) return;
    this.#client = undefined;
    this.#logger.warn({ err: error }, "signals of jobs are not heard for now");
    await client.end().catch(() => undefined);
    const isOpen = await sleep(reconnectAfterMs, true, { signal: this.#closing.signal }).catch(() => false);
    if (isOpen) await this.open();
  }
}
