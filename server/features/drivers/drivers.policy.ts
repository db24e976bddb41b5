import { decidesOn } from "@shared/contract/permissions";
import { ProblemError } from "../../errors";
import type { Caller } from "../../http/route";

/** Whether a person may put models of a category in use: by permission, and only in categories that are theirs. */
export function mayUseModels(caller: Pick<Caller, "permissions" | "categories">, categoryCode: string): boolean {
  return caller.permissions.has("models:use") && decidesOn(caller.categories, categoryCode);
}

/** @throws ProblemError 403 where the category is not the caller's. */
export function requireMayUseModels(caller: Pick<Caller, "permissions" | "categories">, categoryCode: string): void {
  if (mayUseModels(caller, categoryCode)) return;
  const detail = `Only a manager of the category "${categoryCode}" puts its models in use. Ask one of them.`;
  throw new ProblemError({ status: 403, code: "not-your-category", detail });
}
