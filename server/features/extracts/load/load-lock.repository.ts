import type { EntityManager } from "@mikro-orm/postgresql";

/** Waits until no other load or withdrawal runs, and keeps them out until the transaction ends. */
export async function lockLoads(em: EntityManager): Promise<void> {
  await em.execute("select pg_advisory_xact_lock(hashtext('shelftide loads'))");
}
