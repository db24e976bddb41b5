import * as contract from "@shared/contract/unknown-codes";
import { route, type Route } from "../../../http/route";
import { accepted, actorOf } from "../accepted";
import { enterUnknownCodes, getUnknownCodes } from "./unknown-codes.service";

const read = route(contract.getUnknownCodes, ({ em, params }) => getUnknownCodes(em, params.id));

const enter = route(contract.createUnknownCodes, async (call) => {
  const { em, services, params, body, response } = call;
  return accepted(response, await enterUnknownCodes(em, { services, extractId: params.id, actor: actorOf(call), ...body }));
});

export const unknownCodesRoutes: readonly Route[] = [read, enter];
