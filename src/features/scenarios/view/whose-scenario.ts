import type { Scenario } from "@shared/contract/scenarios";

type Reader = { personId: string | undefined; mayPlan: boolean };

/** Whose scenario it is: "yours", or who began it. Everyone who plans may work on it. */
export const whoseScenario = ({ createdBy }: Pick<Scenario, "createdBy">, { personId }: Pick<Reader, "personId">): string =>
  createdBy.id === personId ? "yours" : `begun by ${createdBy.name}`;

/** Why it can only be read; null where it can be changed. */
export const readOnlyReason = ({ state, may }: Pick<Scenario, "state" | "may">, { mayPlan }: Pick<Reader, "mayPlan">): string | null => {
  if (may.edit) return null;
  return mayPlan ? `can be read only, because it is ${state}` : "can be read only: planners and category managers change scenarios";
};
