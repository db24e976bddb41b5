import type { EntityManager } from "@mikro-orm/postgresql";

/** Whether a query finds anything. */
export async function exists(em: EntityManager, sql: string, values: readonly unknown[] = []): Promise<boolean> {
  const [{ any }] = await em.execute<[{ any: boolean }]>(`select exists (${sql}) as any`, [...values]);
  return any;
}
