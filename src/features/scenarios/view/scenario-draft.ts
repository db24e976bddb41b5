import type { PlanCell, Scenario } from "@shared/contract/scenarios";

/** What a person can change on the scenario page; one step of undo is one of these. */
export type ScenarioEdit = { name: string; cells: readonly PlanCell[]; fixedCost: number; modelId: string };

export const editOf = ({ name, cells, fixedCost, modelId }: Scenario): ScenarioEdit => ({ name, cells, fixedCost, modelId });

/** The scenario as it is sent to be saved. */
export const draftOf = (scenario: Scenario, edit: ScenarioEdit) => ({
  name: edit.name,
  product: scenario.product,
  stores: scenario.stores,
  weeks: scenario.weeks,
  cells: [...edit.cells],
  fixedCost: edit.fixedCost,
  modelId: edit.modelId,
});
