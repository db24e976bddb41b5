import type { Route } from "../../http/route";

export const scenariosRoutes: readonly Route[] = [];
