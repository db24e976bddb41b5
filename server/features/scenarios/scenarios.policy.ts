import { conflict, ProblemError } from "../../errors";
import type { Caller } from "../../http/route";
import type { ScenarioState } from "./scenarios.entities";

/** States in which a scenario is still being written. */
const editable: ReadonlySet<ScenarioState> = new Set(["draft", "returned"]);

type Row = { state: ScenarioState; createdBy: { id: string } };

/** Whether a person may change a scenario: everyone who plans, while it is a draft or was returned. */
export function mayEdit(caller: Pick<Caller, "permissions">, { state }: Pick<Row, "state">): boolean {
  return caller.permissions.has("scenarios:write") && editable.has(state);
}

/** @throws ProblemError 409 where the scenario is no longer being written. */
export function requireEditable({ state }: Pick<Row, "state">): void {
  if (editable.has(state)) return;
  throw conflict(
    "not-editable",
    `This scenario is ${state}: it can no longer be changed. Save a copy of it under another name.`,
  );
}

/** @throws ProblemError 403 for another person's scenario, 409 for one that is more than a draft. */
export function requireMayDelete(caller: Pick<Caller, "personId">, { state, createdBy }: Row): void {
  if (createdBy.id !== caller.personId) {
    throw new ProblemError({
      status: 403,
      code: "not-your-scenario",
      detail: "Only the person who began a scenario deletes it. Ask them to.",
    });
  }
  if (state === "draft") return;
  throw conflict("not-a-draft", `This scenario is ${state}: only drafts are deleted.`);
}
