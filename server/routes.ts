import { accountsRoutes } from "./features/accounts";
import { catalogueRoutes } from "./features/catalogue";
import { chainRoutes } from "./features/chain";
import { driversRoutes } from "./features/drivers";
import { extractsRoutes } from "./features/extracts";
import { jobsRoutes } from "./features/jobs";
import { scenariosRoutes } from "./features/scenarios";
import { storesRoutes } from "./features/stores";
import type { Route } from "./http/route";

/** Every route of the HTTP interface. */
export const routes: readonly Route[] = [
  ...chainRoutes, ...accountsRoutes, ...jobsRoutes, ...catalogueRoutes, ...extractsRoutes, ...driversRoutes, ...storesRoutes, ...scenariosRoutes,
];
