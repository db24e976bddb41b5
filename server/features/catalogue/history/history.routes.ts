import * as contract from "@shared/contract/catalogue-history";
import { route, type Route } from "../../../http/route";
import { presentChange } from "./history.presenter";
import { listHistory } from "./history.service";

const list = route(contract.listCatalogueHistory, async ({ em, query }) => {
  const { items, nextCursor } = await listHistory(em, query);
  return { items: items.map(presentChange), nextCursor };
});

export const historyRoutes: readonly Route[] = [list];
