import type { Route } from "../../http/route";

export const catalogueRoutes: readonly Route[] = [];
