import { getComparison } from "@shared/contract/comparisons";
import { route, type Route } from "../../http/route";
import { presentComparison } from "./comparison.presenter";
import { compareStores } from "./comparison.service";

const comparison = route(getComparison, async ({ em, query, now }) =>
  presentComparison(await compareStores(em, { ...query, now })),
);

export const storesRoutes: readonly Route[] = [comparison];
