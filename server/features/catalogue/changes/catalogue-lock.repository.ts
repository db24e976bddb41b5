import type { EntityManager } from "@mikro-orm/postgresql";

/**
 * Lets one writer of the catalogue in at a time, until the transaction ends: rules over several rows (days that must not
 * overlap, products that replace each other) then hold, and what a history calls "before" is what was there.
 */
export async function lockCatalogue(em: EntityManager): Promise<void> {
  await em.execute("select pg_advisory_xact_lock(hashtext('shelftide catalogue'))");
}

/** Does work on the catalogue in a transaction of its own, as its only writer; one flush at its end. */
export function changing<Result>(em: EntityManager, work: (inner: EntityManager) => Promise<Result>): Promise<Result> {
  return em.transactional(async (inner) => {
    await lockCatalogue(inner);
    return work(inner);
  });
}
