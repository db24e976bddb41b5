import type { Express } from "express";
import type { Endpoint } from "@shared/contract/endpoint";
import { contractEndpoints, nameOf } from "./contract-endpoints";

/** What the router really holds under /api, as "METHOD path", read from the router itself. */
export function mountedNames(app: Express): string[] {
  return app.router.stack.flatMap(({ route }) => {
    if (!route) return [];
    const methods = new Set(route.stack.map((step) => step.method.toUpperCase()));
    // The built client, where there is one, is served at several paths by one route.
    const paths = [route.path].flat().filter((path) => path.startsWith("/api"));
    return paths.flatMap((path) => [...methods].map((method) => `${method} ${path}`));
  });
}

/** The contract's endpoint of each mounted route. */
export function mountedEndpoints(app: Express): Endpoint[] {
  const byName = new Map(contractEndpoints().map((endpoint) => [nameOf(endpoint), endpoint]));
  return mountedNames(app).map((name) => {
    const endpoint = byName.get(name);
    if (!endpoint) throw new Error(`${name} is mounted, but not in the contract.`);
    return endpoint;
  });
}

/** Parameters that are neither identifiers nor codes, and a value that is right for each. */
const others: Record<string, string> = { ":firstDay": "2026-06-01", ":validFrom": "2026-06-01", ":week": "2026-06-01", ":scope": "store" };

/** The endpoint's path with an identifier that nothing has: a number for occurrences of events, else a UUID. */
export function pathOf({ path }: Endpoint, id = path.startsWith("/api/events/") ? "999999999" : "00000000-0000-4000-8000-000000000000"): string {
  return path.replace(/:\w+/g, (name) => others[name] ?? id);
}
