import type { Route } from "../../http/route";

export const jobsRoutes: readonly Route[] = [];
