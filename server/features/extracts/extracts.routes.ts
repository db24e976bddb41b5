import type { Route } from "../../http/route";

export const extractsRoutes: readonly Route[] = [];
