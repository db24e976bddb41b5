import type { EntityManager } from "@mikro-orm/postgresql";

/**
 * Names the sales as they stand, and the chain's threshold for a second look: each load and each withdrawal makes it another
 * name that never comes back. What was worked out from it before still holds where the name is the same under the load lock.
 */
export async function salesStanding(em: EntityManager): Promise<string> {
  const [{ standing }] = await em.execute<[{ standing: string }]>(
    `select concat_ws(':', count(*) filter (where state in ('loaded', 'withdrawn')), count(*) filter (where state = 'withdrawn'),
       (select second_look_share from chain)) as standing
     from extracts where kind = 'sales'`,
  );
  return standing;
}
