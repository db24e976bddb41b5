import type { EntityManager } from "@mikro-orm/postgresql";
import { serialiseModel } from "@shared/engine";
import { unusable } from "../../../errors";
import type { Services } from "../../../services";
import { audit } from "../../accounts";
import { fitModelsJob } from "../drivers.jobs";
import type { ModelRow } from "../drivers.entities";
import { readSalesRows } from "../sales/sales.repository";
import { asProblem } from "./fit-problem";
import { fitStore, type StoreFit } from "./fit-store";
import { noWeeks } from "./fit-stores";
import { insertFit } from "./models.repository";
import { addModel, checkRequest, type CheckedRequest, type FitRequest } from "./new-model";
import { useFirstModel } from "./use-model";

/** One store was fitted at once, or several are being fitted in the background. */
export type NewModelAnswer =
  | { kind: "fitted"; modelId: string; fit: StoreFit }
  | { kind: "accepted"; modelId: string; jobId: string };

/**
 * Fits a product's model: for one named store within the request, else by a job that fits each store apart.
 *
 * @throws ProblemError 422 where codes, weeks or the specification cannot be used; the engine's code and message pass through.
 */
export async function createModel(
  em: EntityManager,
  { request, services, now }: { request: FitRequest; services: Services; now: Date },
): Promise<NewModelAnswer> {
  const checked = await checkRequest(em, request);
  const isOneStore = request.stores !== undefined && checked.storesFound.length === 1;
  return isOneStore ? fitOneStore(em, checked, now) : fitInBackground(em, { request: checked, services, now });
}

async function fitOneStore(em: EntityManager, request: CheckedRequest, now: Date): Promise<NewModelAnswer> {
  const {
    productFound,
    storesFound: [store],
    weeks: range,
  } = request;
  const weeks = await readSalesRows(em, { productId: productFound.id, storeIds: [store.id], ...range });
  if (weeks.length === 0)
    throw unusable("no-sales", noWeeks({ store: store.code, product: productFound.code, weeks: range }));
  const fit = attempt(() => fitStore({ store: store.code, weeks, spec: request.spec ?? null }));

  const modelId = await em.transactional(async (inner) => {
    const model = addModel(inner, { request, at: now });
    model.fittedAt = now;
    auditFit(inner, { model, request, action: "model.fitted" });
    await inner.flush();
    await insertFit(inner, {
      modelId: model.id,
      storeId: store.id,
      text: serialiseModel(fit.model),
      summary: fit.summary,
      at: now,
    });
    await useFirstModel(inner, { modelId: model.id, productId: productFound.id, spec: model.spec ?? null, at: now });
    return model.id;
  });
  return { kind: "fitted", modelId, fit };
}

function attempt<Result>(work: () => Result): Result {
  try {
    return work();
  } catch (error) {
    throw asProblem(error);
  }
}

async function fitInBackground(
  em: EntityManager,
  { request, services, now }: { request: CheckedRequest; services: Services; now: Date },
): Promise<NewModelAnswer> {
  return em.transactional(async (inner) => {
    const model = addModel(inner, { request, at: now });
    auditFit(inner, { model, request, action: "model.fit-requested" });
    await inner.flush();
    const payload = { modelId: model.id, stores: request.storesFound.map(({ id, code }) => ({ id, code })) };
    const jobId = await services.queue.enqueue(inner, fitModelsJob, payload, {
      personId: request.personId,
      subject: `/api/models/${model.id}`,
    });
    model.jobId = jobId;
    return { kind: "accepted" as const, modelId: model.id, jobId };
  });
}

function auditFit(
  em: EntityManager,
  { model, request, action }: { model: ModelRow; request: CheckedRequest; action: string },
): void {
  audit(em, {
    personId: request.personId,
    tokenId: request.tokenId,
    requestId: request.requestId,
    action,
    subject: { kind: "model", id: model.id },
    detail: { product: request.productFound.code, stores: request.storesFound.length, weeks: request.weeks ?? null },
  });
}
