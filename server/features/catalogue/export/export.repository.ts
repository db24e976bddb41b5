import type { EntityManager } from "@mikro-orm/postgresql";
import type { CsvCell } from "@shared/csv";

const rowsAtOnce = 5_000;

/** The rows of a query as they were when it began, some thousands at a time, so that memory stays flat. Call it inside a transaction. */
export async function* rowsOf(em: EntityManager, query: string): AsyncGenerator<CsvCell[][]> {
  await em.execute(`declare exported no scroll cursor for ${query}`);
  for (;;) {
    const rows = await em.execute<Record<string, CsvCell>[]>(`fetch ${rowsAtOnce} from exported`);
    if (rows.length > 0) yield rows.map((row) => Object.values(row));
    if (rows.length < rowsAtOnce) return;
  }
}
