import * as contract from "@shared/contract/chain";
import { publicRoute, route, type Route } from "../../http/route";
import { presentChain } from "./chain.presenter";
import { changeChain, getChain } from "./chain.service";
import { checkHealth } from "./health.service";

const health = publicRoute(contract.getHealth, ({ services }) => checkHealth(services));

const readChain = route(contract.getChain, async ({ em }) => presentChain(await getChain(em)));

const putChain = route(contract.putChain, async ({ body, em, caller, requestId }) => {
  return presentChain(await changeChain(em, body, { caller, requestId }));
});

export const chainRoutes: readonly Route[] = [health, readChain, putChain];
