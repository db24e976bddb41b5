import type { EntityManager } from "@mikro-orm/postgresql";
import type { changedFundingSchema, newFundingSchema } from "@shared/contract/catalogue-funding";
import type { z } from "zod";
import { notFound } from "../../../errors";
import { ProductFundingEntity, type ProductFunding } from "../catalogue.entities";
import type { Write } from "../changes/author";
import { changing } from "../changes/catalogue-lock.repository";
import { lastBeforeFirst, requireNoOverlap } from "../changes/overlapping-days";
import { recordChange } from "../changes/record-change";
import { requireSeen } from "../changes/versions";
import { requireNamedProduct, requireProductAt } from "../codes-named.repository";
import { fundingValues } from "../describe";
import { findLastChange } from "../history/history.repository";
import { versionOfFunding } from "./funding.presenter";
import { findFunding } from "./funding.repository";

/** Contributions by product and first day. @throws ProblemError 404 for a product that is none. */
export async function listFunding(em: EntityManager, { product }: { product?: string }): Promise<ProductFunding[]> {
  if (product !== undefined) await requireProductAt(em, product);
  return findFunding(em, { product });
}

/** Enters a contribution. @throws ProblemError 422 that names a field: an unknown product, or days that another one covers. */
export function createFunding(em: EntityManager, { funding, write }: { funding: z.output<typeof newFundingSchema>; write: Write }): Promise<ProductFunding> {
  return changing(em, async (inner) => {
    const { product: code, ...given } = funding;
    const product = await requireNamedProduct(inner, { code, path: "product" });
    requireOwnDays({ code, days: given, others: await findFunding(inner, { product: code }), path: "firstDay" });
    const row = inner.create(ProductFundingEntity, { product, ...given });
    inner.persist(row);
    recordChange(inner, { by: write.by, what: "funding", code, before: null, after: fundingValues(row) });
    return row;
  });
}

type Place = { product: string; firstDay: string; write: Write };

/** Changes a contribution. @throws ProblemError 404, 412, or 422 that names a field. */
export function changeFunding(em: EntityManager, { funding, ...place }: Place & { funding: z.output<typeof changedFundingSchema> }): Promise<ProductFunding> {
  return changing(em, async (inner) => {
    const { product: code, firstDay, write } = place;
    const { row, others } = await seenFunding(inner, place);
    if (funding.lastDay < firstDay) throw lastBeforeFirst();
    requireOwnDays({ code, days: { firstDay, lastDay: funding.lastDay }, others, path: "lastDay" });
    const before = fundingValues(row);
    inner.assign(row, funding);
    recordChange(inner, { by: write.by, what: "funding", code, before, after: fundingValues(row) });
    return row;
  });
}

/** Removes a contribution. @throws ProblemError 404 or 412. */
export function removeFunding(em: EntityManager, place: Place): Promise<void> {
  return changing(em, async (inner) => {
    const { row } = await seenFunding(inner, place);
    inner.remove(row);
    recordChange(inner, { by: place.write.by, what: "funding", code: place.product, before: fundingValues(row), after: null });
  });
}

async function seenFunding(em: EntityManager, { product, firstDay, write }: Place) {
  const all = await findFunding(em, { product });
  const row = all.find((each) => each.firstDay === firstDay);
  await requireSeen({
    seen: write.seen, version: row ? versionOfFunding(row) : null, what: `the funding of ${product} from ${firstDay}`,
    lastChange: () => findLastChange(em, { kind: "product", what: "funding", code: product }),
  });
  if (!row) throw notFound("funding");
  return { row, others: all.filter((each) => each !== row) };
}

type Own = { code: string; days: { firstDay: string; lastDay: string }; others: readonly ProductFunding[]; path: string };

function requireOwnDays({ code, days, others, path }: Own): void {
  requireNoOverlap({ days, others, path, says: (taken) => `${code} has funding ${taken} already: two contributions cannot share a day.` });
}
