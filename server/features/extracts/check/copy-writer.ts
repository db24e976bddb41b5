import type { EntityManager } from "@mikro-orm/postgresql";
import { once } from "node:events";
import { finished } from "node:stream/promises";
import type { PoolClient } from "pg";
import { from as copyFrom, type CopyStreamQuery } from "pg-copy-streams";

/** A write to the database for each row would take most of the time. */
const chunkLength = 64 * 1024;

/** Sends rows to a table by COPY, in the context's open transaction; nothing else may use that meanwhile. */
export class CopyWriter {
  readonly #stream: CopyStreamQuery;
  readonly #done: Promise<void>;
  #rows: string[] = [];
  #length = 0;

  private constructor(stream: CopyStreamQuery) {
    this.#stream = stream;
    this.#done = finished(stream);
    // Awaited at the next write or at the end; until then a failure must not end the process.
    this.#done.catch(() => undefined);
  }

  static async open(em: EntityManager, { table, columns }: { table: string; columns: readonly string[] }): Promise<CopyWriter> {
    const transaction = em.getTransactionContext<{ client: { acquireConnection: () => Promise<PoolClient> } }>();
    if (!transaction) throw new Error("Rows are copied inside a transaction only: wrap it in em.transactional.");
    const client = await transaction.client.acquireConnection();
    return new CopyWriter(client.query(copyFrom(`copy ${table} (${columns.join(", ")}) from stdin`)));
  }

  /** Adds a row in COPY's text format, without its line end. */
  add(row: string): void {
    this.#rows.push(row);
    this.#length += row.length + 1;
  }

  /** Sends what has gathered, and waits where the database is slower than we are. */
  async flush(): Promise<void> {
    if (this.#length < chunkLength) return;
    await this.#send();
  }

  async end(): Promise<void> {
    await this.#send();
    this.#stream.end();
    await this.#done;
  }

  /** Ends a copy whose rows are not wanted: the transaction is then to be rolled back. */
  async abandon(error: Error): Promise<void> {
    this.#stream.destroy(error);
    await this.#done.catch(() => undefined);
  }

  async #send(): Promise<void> {
    if (this.#rows.length === 0) return;
    const chunk = `${this.#rows.join("\n")}\n`;
    this.#rows = [];
    this.#length = 0;
    if (this.#stream.write(chunk)) return;
    await Promise.race([once(this.#stream, "drain"), this.#done]);
  }
}
