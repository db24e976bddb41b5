import * as contract from "@shared/contract/catalogue-temperatures";
import { route, type Route } from "../../../http/route";
import { tagged, writeOf } from "../changes/write-of";
import { listTemperatures, putTemperature, removeTemperature } from "./temperatures.service";

const list = route(contract.listTemperatures, ({ em, params, query }) => listTemperatures(em, { ...params, ...query }));

const put = route(contract.putTemperature, async (call) =>
  tagged(call, await putTemperature(call.em, { ...call.params, ...call.body, write: writeOf(call) })));

const remove = route(contract.deleteTemperature, async (call) => {
  await removeTemperature(call.em, { ...call.params, write: writeOf(call) });
  return undefined;
});

export const temperaturesRoutes: readonly Route[] = [list, put, remove];
