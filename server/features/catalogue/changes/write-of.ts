import type { Endpoint } from "@shared/contract/endpoint";
import type { SignedInCall } from "../../../http/route";
import type { Write } from "./author";
import { entityTag } from "./versions";

type Part = Pick<SignedInCall<Endpoint>, "caller" | "requestId" | "request">;

/** Who writes by a request, and what its headers say of the version they had seen. */
export function writeOf({ caller, requestId, request }: Part): Write {
  return {
    by: { personId: caller.personId, tokenId: caller.tokenId, requestId },
    seen: { ifMatch: request.get("if-match"), ifNoneMatch: request.get("if-none-match") },
  };
}

/** The same item; its version goes out as the answer's ETag too. */
export function tagged<Item extends { version: string | null }>({ response }: Pick<SignedInCall<Endpoint>, "response">, item: Item): Item {
  if (item.version !== null) response.set("ETag", entityTag(item.version));
  return item;
}
