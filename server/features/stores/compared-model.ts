import type { EntityManager } from "@mikro-orm/postgresql";
import { unusable } from "../../errors";
import {
  findFits,
  requireModelOfProduct,
  type ProductReference,
  type SkippedStore,
  type StoredFit,
} from "../drivers";

/** A model whose stores are compared. */
export type ComparedModel = {
  id: string;
  fits: StoredFit[];
  skipped: readonly SkippedStore[];
  weeks: { first?: string; last?: string };
};

/**
 * The model to compare stores by: the one named, else the product's model in use.
 *
 * @throws ProblemError 404 for an unknown model, 422 where it is another product's or none is in use.
 */
export async function fitsToCompare(
  em: EntityManager,
  { product, modelId }: { product: ProductReference; modelId?: string },
): Promise<ComparedModel> {
  const model = await requireModelOfProduct(em, { product, modelId });
  const fits = await findFits(em, { modelId: model.id });
  if (fits.length === 0) throw unusable("still-fitting", "This model has no fit yet. Wait until its job has ended.");
  const weeks = { first: model.firstWeek ?? undefined, last: model.lastWeek ?? undefined };
  return { id: model.id, fits, skipped: model.skipped, weeks };
}
