import * as contract from "@shared/contract/scenarios";
import { route, type Route } from "../../http/route";
import { readPlanningContext } from "./context/read-context.service";
import { predictSavedScenario } from "./predict-scenario.service";
import { cursorAt, placeAt } from "./scenario-cursor";
import { entityTag } from "./scenario-version";
import { presentContext, presentListedScenario, presentPrediction, presentScenario } from "./scenarios.presenter";
import { createScenario, deleteScenario, listScenarios, readScenario, saveScenario } from "./scenarios.service";

const list = route(contract.listScenarios, async ({ em, query, caller }) => {
  const after = query.cursor === undefined ? undefined : placeAt(query.cursor);
  const { scenarios, next } = await listScenarios(em, { product: query.product, after, limit: query.limit });
  return {
    items: scenarios.map((scenario) => presentListedScenario(scenario, caller)),
    nextCursor: next && cursorAt(next),
  };
});

const create = route(contract.createScenario, async ({ em, body, caller, requestId, now, response }) => {
  const { personId, tokenId } = caller;
  const scenario = await createScenario({ em, draft: body, personId, tokenId, requestId, now });
  response.location(`/api/scenarios/${scenario.id}`).set("ETag", entityTag(scenario.version));
  return presentScenario(scenario, caller);
});

const read = route(contract.getScenario, async ({ em, params, caller, response }) => {
  const scenario = await readScenario(em, params.id);
  response.set("ETag", entityTag(scenario.version));
  return presentScenario(scenario, caller);
});

const save = route(contract.putScenario, async ({ em, params, body, caller, now, request, response }) => {
  const { personId } = caller;
  const scenario = await saveScenario(em, {
    id: params.id,
    draft: body,
    ifMatch: request.get("if-match"),
    personId,
    now,
  });
  response.set("ETag", entityTag(scenario.version));
  return presentScenario(scenario, caller);
});

const remove = route(contract.deleteScenario, async ({ em, params, caller, requestId }) => {
  await deleteScenario(em, { id: params.id, caller, requestId });
  return undefined;
});

const predict = route(contract.predictScenario, async ({ em, params, body }) =>
  presentPrediction(await predictSavedScenario(em, { id: params.id, level: body.level })),
);

const context = route(contract.getPlanningContext, async ({ em, query }) => {
  const stores = query.stores
    .split(",")
    .map((code) => code.trim())
    .filter((code) => code !== "");
  const { context, history } = await readPlanningContext(em, { ...query, stores });
  return presentContext(context, history);
});

export const scenariosRoutes: readonly Route[] = [list, create, read, save, remove, predict, context];
