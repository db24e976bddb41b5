import * as contract from "@shared/contract/drivers";
import { route, type Route } from "../../http/route";
import { presentCurve } from "./curves/curves.presenter";
import { curvesOfStore } from "./curves/curves.service";
import { createModel } from "./models/create-model.service";
import { presentFit, presentModel } from "./models/models.presenter";
import { listModelsOfProduct, readFits, readModel } from "./models/read-models.service";
import { useModel } from "./models/use-model.service";
import { presentSalesWeek } from "./sales/sales.presenter";
import { salesOfStore } from "./sales/sales.service";

const codesOf = (list: string | undefined) =>
  list
    ?.split(",")
    .map((code) => code.trim())
    .filter((code) => code !== "");

const salesWeeks = route(contract.getSalesWeeks, async ({ em, query }) => {
  const rows = await salesOfStore(em, query);
  return { items: rows.map(presentSalesWeek) };
});

const newModel = route(contract.createModel, async ({ em, body, caller, services, now, requestId, response }) => {
  const { personId, tokenId } = caller;
  const answer = await createModel(em, { request: { ...body, personId, tokenId, requestId }, services, now });
  if (answer.kind === "fitted") return presentFit(answer);
  const accepted = { jobId: answer.jobId, id: answer.modelId };
  response.status(202).location(`/api/jobs/${answer.jobId}`).json(accepted);
  return undefined;
});

const models = route(contract.listModels, async ({ em, query, caller }) => {
  const found = await listModelsOfProduct(em, query);
  return { items: found.map((each) => presentModel(each, caller)) };
});

const model = route(contract.getModel, async ({ em, params, caller }) =>
  presentModel(await readModel(em, params.id), caller),
);

const fits = route(contract.getModelFits, async ({ em, params, query }) => {
  const found = await readFits(em, { modelId: params.id, stores: codesOf(query.stores) });
  return { items: found.map(({ store, fit }) => ({ store, fit })) };
});

const modelInUse = route(contract.useModel, async ({ em, params, caller, requestId, now }) =>
  presentModel(await useModel(em, { modelId: params.id, caller, requestId, now }), caller),
);

const curves = route(contract.getModelCurves, async ({ em, params, query }) => {
  const found = await curvesOfStore(em, { modelId: params.id, ...query });
  return { ...found, curves: found.curves.map(presentCurve) };
});

export const driversRoutes: readonly Route[] = [salesWeeks, newModel, models, model, fits, modelInUse, curves];
