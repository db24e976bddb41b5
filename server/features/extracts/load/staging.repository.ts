import type { EntityManager } from "@mikro-orm/postgresql";
import { exists } from "../../../database/exists";
import type { StagedColumn } from "../kinds/kind";

/** The table in which an extract's usable rows wait between check and load. */
export function stagingTable(extractId: string): string {
  return `staging."rows_${extractId.replaceAll("-", "")}"`;
}

/** Makes the table anew, in the open transaction. */
export async function createStaging(em: EntityManager, { extractId, columns }: { extractId: string; columns: readonly StagedColumn[] }): Promise<string> {
  const table = stagingTable(extractId);
  await dropStaging(em, extractId);
  const definitions = columns.map(({ name, type }) => `${name} ${type}`).join(", ");
  await em.execute(`create unlogged table ${table} (line integer not null, ${definitions})`);
  return table;
}

export async function dropStaging(em: EntityManager, extractId: string): Promise<void> {
  await em.execute(`drop table if exists ${stagingTable(extractId)}`);
}

/** Whether rows wait. They are all there or none: what a broken database server empties, it empties wholly. */
export async function hasStaged(em: EntityManager, extractId: string): Promise<boolean> {
  const table = stagingTable(extractId);
  return (await isThere(em, table)) && exists(em, `select from ${table}`);
}

/** How many rows wait; none where the table is gone, or was emptied because the database server broke down. */
export async function countStaged(em: EntityManager, extractId: string): Promise<number> {
  const table = stagingTable(extractId);
  if (!(await isThere(em, table))) return 0;
  const [{ count }] = await em.execute<[{ count: number }]>(`select count(*)::int as count from ${table}`);
  return count;
}

const isThere = (em: EntityManager, table: string): Promise<boolean> => exists(em, "select where to_regclass(?) is not null", [table]);

/** Tells the planner what is in the table, which it would else take for nearly empty. */
export async function analyseStaging(em: EntityManager, table: string): Promise<void> {
  await em.execute(`analyze ${table}`);
}
