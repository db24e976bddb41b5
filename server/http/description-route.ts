import { getDescription } from "@shared/contract/chain";
import { describeEndpoints } from "./openapi";
import { publicRoute, type Route } from "./route";

/** Serves the description of these routes and of itself; it is written at the first request and kept. */
export function descriptionRoute(routes: readonly Route[]): Route {
  let description: ReturnType<typeof describeEndpoints> | undefined;
  return publicRoute(getDescription, async () => {
    description ??= describeEndpoints([...routes.map((route) => route.endpoint), getDescription]);
    return description;
  });
}
