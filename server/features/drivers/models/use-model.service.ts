import type { EntityManager } from "@mikro-orm/postgresql";
import { conflict, unusable } from "../../../errors";
import type { Caller } from "../../../http/route";
import { audit } from "../../accounts";
import { requireMayUseModels } from "../drivers.policy";
import { lockProduct, switchModelInUse, type LoadedModel } from "./models.repository";
import { notForPlans } from "./not-for-plans";
import { readModel, requireModel, type ModelWithFits } from "./read-models.service";

/**
 * Puts a model in use in place of the one before. Doing it again changes nothing.
 *
 * @throws ProblemError 404 for an unknown model, 403 outside the caller's categories, 409 while it is being fitted, 422
 * where plans cannot use it.
 */
export async function useModel(
  em: EntityManager,
  { modelId, caller, requestId, now }: { modelId: string; caller: Caller; requestId: string; now: Date },
): Promise<ModelWithFits> {
  const model = await requireModel(em, modelId);
  requireMayUseModels(caller, model.product.category.code);
  requireUsable(model);
  await em.transactional(async (inner) => {
    await lockProduct(inner, model.product.id);
    await inner.refresh(model);
    if (model.state === "in-use") return;
    await switchModelInUse(inner, { modelId, productId: model.product.id, personId: caller.personId, at: now });
    audit(inner, {
      personId: caller.personId,
      tokenId: caller.tokenId,
      requestId,
      action: "model.used",
      subject: { kind: "model", id: modelId },
      detail: { product: model.product.code },
    });
  });
  em.clear();
  return readModel(em, modelId);
}

function requireUsable(model: LoadedModel): void {
  if (!model.fittedAt) {
    throw conflict(
      "still-fitting",
      "This model is still being fitted. Wait until its job has ended, then put it in use.",
    );
  }
  const reason = model.spec ? notForPlans(model.spec) : null;
  if (reason !== null) throw unusable("not-for-plans", `${reason} It can be looked at, but not put in use.`);
}
