import * as contract from "@shared/contract";
import type { Endpoint } from "@shared/contract/endpoint";

/** Every endpoint that the contract defines, in whichever of its files. */
export function contractEndpoints(): Endpoint[] {
  const exported: unknown[] = Object.values(contract).flatMap((feature) => Object.values(feature));
  return exported.filter(isEndpoint);
}

function isEndpoint(value: unknown): value is Endpoint {
  return typeof value === "object" && value !== null && "method" in value && "path" in value && "summary" in value;
}

export const nameOf = ({ method, path }: Pick<Endpoint, "method" | "path">): string => `${method} ${path}`;
