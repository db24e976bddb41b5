import type { Route } from "../../http/route";

export const driversRoutes: readonly Route[] = [];
