import * as contract from "@shared/contract/saved-layouts";
import { route, type Route } from "../../../http/route";
import { accepted, actorOf } from "../accepted";
import { getExtractLayout, previewExtractLayout, putExtractLayout } from "./extract-layout.service";
import { presentSavedLayout } from "./layouts.presenter";
import { changeSavedLayout, createSavedLayout, deleteSavedLayout, listSavedLayouts } from "./saved-layouts.service";

const list = route(contract.listLayouts, async ({ em, query }) =>
  ({ items: (await listSavedLayouts(em, query.kind)).map(presentSavedLayout) }));

const create = route(contract.createLayout, async (call) =>
  presentSavedLayout(await createSavedLayout(call.em, { ...call.body, actor: actorOf(call), now: call.now })));

const change = route(contract.putLayout, async (call) =>
  presentSavedLayout(await changeSavedLayout(call.em, { id: call.params.id, ...call.body, actor: actorOf(call), now: call.now })));

const remove = route(contract.deleteLayout, async (call) => {
  await deleteSavedLayout(call.em, { id: call.params.id, actor: actorOf(call) });
  return undefined;
});

const read = route(contract.getExtractLayout, ({ em, services, params }) => getExtractLayout(em, { services, extractId: params.id }));

const preview = route(contract.previewLayout, ({ em, services, params, body }) =>
  previewExtractLayout(em, { services, extractId: params.id, layout: body.layout }), { throttle: "read" });

const choose = route(contract.putExtractLayout, async (call) => {
  const { em, services, params, body, response } = call;
  return accepted(response, await putExtractLayout(em, { services, extractId: params.id, ...body, actor: actorOf(call) }));
});

export const layoutsRoutes: readonly Route[] = [list, create, change, remove, read, preview, choose];
