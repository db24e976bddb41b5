import { accountsRoutes } from "./features/accounts";
import { catalogueRoutes } from "./features/catalogue";
import { chainRoutes } from "./features/chain";
import { driversRoutes } from "./features/drivers";
import { coverageRoutes, extractsRoutes, issuesRoutes, layoutsRoutes, unknownCodesRoutes } from "./features/extracts";
import { jobsRoutes } from "./features/jobs";
import { noticesRoutes } from "./features/notices";
import { scenariosRoutes } from "./features/scenarios";
import { storesRoutes } from "./features/stores";
import { descriptionRoute } from "./http/description-route";
import type { Route } from "./http/route";

const features: readonly Route[] = [
  ...chainRoutes, ...accountsRoutes, ...jobsRoutes, ...catalogueRoutes, ...extractsRoutes, ...issuesRoutes, ...layoutsRoutes, ...unknownCodesRoutes, ...coverageRoutes, ...driversRoutes, ...storesRoutes, ...scenariosRoutes, ...noticesRoutes,
];

/** Every route of the HTTP interface. */
export const routes: readonly Route[] = [...features, descriptionRoute(features)];
