import type { Route } from "../../http/route";

export const accountsRoutes: readonly Route[] = [];
