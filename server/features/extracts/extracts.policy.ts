import type { Caller } from "../../http/route";
import type { Extract } from "./extracts.entities";

/** Whether it is read as we worked it out, and no person has looked at that yet. */
export const awaitsLayout = ({ layoutOrigin, layoutConfirmed }: Pick<Extract, "layoutOrigin" | "layoutConfirmed">): boolean =>
  layoutOrigin === "proposed" && !layoutConfirmed;

export type ExtractRights = { check: boolean; load: boolean; withdraw: boolean };

/** What a caller may do next with an extract, by permission and by the state it is in. */
export function extractRights(extract: Extract, caller: Pick<Caller, "permissions">): ExtractRights {
  if (!caller.permissions.has("extracts:write")) return { check: false, load: false, withdraw: false };
  const { state, kind, failure } = extract;
  return {
    // A file just received is about to be checked by itself.
    check: state === "checked" || state === "unusable" || (state === "received" && failure != null),
    load: state === "checked" && !awaitsLayout(extract),
    withdraw: state === "loaded" && kind === "sales",
  };
}
