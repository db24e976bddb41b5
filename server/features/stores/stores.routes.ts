import type { Route } from "../../http/route";

export const storesRoutes: readonly Route[] = [];
