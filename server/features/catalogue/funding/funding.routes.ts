import * as contract from "@shared/contract/catalogue-funding";
import { route, type Route } from "../../../http/route";
import { tagged, writeOf } from "../changes/write-of";
import { presentFunding } from "./funding.presenter";
import { changeFunding, createFunding, listFunding, removeFunding } from "./funding.service";

const list = route(contract.listFunding, async ({ em, query }) => ({ items: (await listFunding(em, query)).map(presentFunding) }));

const create = route(contract.createFunding, async (call) =>
  tagged(call, presentFunding(await createFunding(call.em, { funding: call.body, write: writeOf(call) }))));

const put = route(contract.putFunding, async (call) =>
  tagged(call, presentFunding(await changeFunding(call.em, { ...call.params, funding: call.body, write: writeOf(call) }))));

const remove = route(contract.deleteFunding, async (call) => {
  await removeFunding(call.em, { ...call.params, write: writeOf(call) });
  return undefined;
});

export const fundingRoutes: readonly Route[] = [list, create, put, remove];
