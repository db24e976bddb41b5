import type { Services } from "../../../services";
import { audit } from "../../accounts";
import { fitStores, type FitOutcome } from "./fit-stores";
import { deleteUnfinishedModel, lockProduct, switchModelInUse } from "./models.repository";
import { addModel, checkRequest, type FitRequest } from "./new-model";

/**
 * Fits a product in this process, store by store, without a job: for the demo, and for scripts that run on the server.
 *
 * @param request.putInUse also puts the model in use in place of the one before.
 * @throws ProblemError 422 for an unknown product or store, or where no store could be fitted; no model is left then.
 */
export async function fitProduct(
  services: Services,
  { putInUse = false, ...request }: FitRequest & { putInUse?: boolean },
): Promise<FitOutcome & { modelId: string }> {
  const em = services.orm.em.fork();
  const at = services.now();
  const checked = await checkRequest(em, request);
  const { id: productId, code: productCode } = checked.productFound;
  const model = addModel(em, { request: checked, at });
  await em.flush();
  try {
    const work = { id: model.id, productId, productCode, spec: model.spec ?? null, weeks: request.weeks };
    const outcome = await fitStores({ em, model: work, stores: checked.storesFound, at });
    await em.transactional(async (inner) => {
      if (putInUse) {
        await lockProduct(inner, productId);
        await switchModelInUse(inner, { modelId: model.id, productId, personId: request.personId, at });
      }
      audit(inner, {
        personId: request.personId,
        action: putInUse ? "model.used" : "model.fitted",
        subject: { kind: "model", id: model.id },
        detail: { product: productCode, stores: outcome.fitted },
      });
    });
    return { modelId: model.id, ...outcome };
  } catch (error) {
    await deleteUnfinishedModel(services.orm.em.fork(), model.id);
    throw error;
  }
}
