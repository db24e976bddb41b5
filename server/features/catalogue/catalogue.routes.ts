import type { Route } from "../../http/route";
import { eventsRoutes } from "./events/events.routes";
import { exportRoutes } from "./export/export.routes";
import { fundingRoutes } from "./funding/funding.routes";
import { historyRoutes } from "./history/history.routes";
import { listingsRoutes } from "./listings/listings.routes";
import { productsRoutes } from "./products/products.routes";
import { storesRoutes } from "./stores/stores.routes";
import { temperaturesRoutes } from "./temperatures/temperatures.routes";

export const catalogueRoutes: readonly Route[] = [
  ...exportRoutes, ...storesRoutes, ...productsRoutes, ...listingsRoutes, ...fundingRoutes, ...eventsRoutes, ...temperaturesRoutes, ...historyRoutes,
];
