import type { EntityManager } from "@mikro-orm/postgresql";
import { ChainEntity, type ChainRow } from "./chain.entities";

/** The table has one row. */
export const chainId = 1;

export function findChain(em: EntityManager): Promise<ChainRow | null> {
  return em.findOne(ChainEntity, { id: chainId });
}
