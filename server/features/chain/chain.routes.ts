import type { Route } from "../../http/route";

export const chainRoutes: readonly Route[] = [];
