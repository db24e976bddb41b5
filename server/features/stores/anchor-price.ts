import type { EntityManager } from "@mikro-orm/postgresql";
import type { FittedTerm } from "@shared/engine";
import { findLastRegularPrice, findRegularPrice } from "./anchor.repository";

/**
 * The price that curves are drawn relative to unless one is asked for: the chain's regular price today; where its terms
 * say none, the commonest regular price of the last week of sales; else the middle of what the stores have seen.
 */
export async function anchorPrice(
  em: EntityManager,
  { productId, terms, now }: { productId: number; terms: readonly FittedTerm[]; now: Date },
): Promise<number> {
  const on = now.toISOString().slice(0, 10);
  const regular = (await findRegularPrice(em, { productId, on })) ?? (await findLastRegularPrice(em, productId));
  return regular ?? middleOf(terms);
}

function middleOf(terms: readonly FittedTerm[]): number {
  const seen = terms.map((term) => term.observedRange).filter((range) => range !== null);
  return Math.sqrt(Math.min(...seen.map(([lowest]) => lowest)) * Math.max(...seen.map(([, highest]) => highest)));
}
