import * as contract from "@shared/contract/catalogue-events";
import { route, type Route } from "../../../http/route";
import { tagged, writeOf } from "../changes/write-of";
import { presentEvent } from "./events.presenter";
import { changeEvent, createEvent, listEvents, removeEvent } from "./events.service";

const list = route(contract.listEvents, async ({ em, query }) => ({ items: (await listEvents(em, query)).map(presentEvent) }));

const create = route(contract.createEvent, async (call) =>
  tagged(call, presentEvent(await createEvent(call.em, { event: call.body, write: writeOf(call) }))));

const put = route(contract.putEvent, async (call) =>
  tagged(call, presentEvent(await changeEvent(call.em, { id: call.params.id, event: call.body, write: writeOf(call) }))));

const remove = route(contract.deleteEvent, async (call) => {
  await removeEvent(call.em, { id: call.params.id, write: writeOf(call) });
  return undefined;
});

export const eventsRoutes: readonly Route[] = [list, create, put, remove];
