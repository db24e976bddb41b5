import type { BaseCell, Prediction, Scenario } from "@shared/contract/scenarios";
import type { Caller } from "../../http/route";
import { presentSalesWeek, type StoredSalesRow } from "../drivers";
import type { PlanBase } from "./context/planning-context.service";
import type { SavedPrediction } from "./predict-scenario.service";
import type { ScenarioRow } from "./scenarios.entities";
import { mayEdit } from "./scenarios.policy";
import { cellsOf } from "./scenarios.repository";

/** A scenario without its cells, as lists show it. */
export function presentListedScenario(scenario: ScenarioRow, caller: Caller): Omit<Scenario, "cells"> {
  const { id, name, product, model, stores, firstWeek, lastWeek, fixedCost, state, version, createdBy, updatedBy } =
    scenario;
  return {
    id,
    name,
    product: product.code,
    stores: [...stores],
    weeks: { first: firstWeek, last: lastWeek },
    fixedCost,
    modelId: model.id,
    model: { id: model.id, fittedAt: model.createdAt.toISOString(), state: model.state },
    state,
    version,
    createdBy: { id: createdBy.id, name: createdBy.name },
    createdAt: scenario.createdAt.toISOString(),
    updatedBy: { id: updatedBy.id, name: updatedBy.name },
    updatedAt: scenario.updatedAt.toISOString(),
    may: { edit: mayEdit(caller, scenario) },
  };
}

/** A scenario, and what the reader may do with it. */
export function presentScenario(scenario: ScenarioRow, caller: Caller): Scenario {
  return { ...presentListedScenario(scenario, caller), cells: cellsOf(scenario) };
}

/** All a browser needs to predict by itself. */
export function presentContext(
  { modelId, base, fits, notes }: PlanBase,
  history: readonly StoredSalesRow[],
): {
  modelId: string;
  base: BaseCell[];
  fits: { store: string; fit: string }[];
  history: ReturnType<typeof presentHistory>[];
  notes: string[];
} {
  return {
    modelId,
    base,
    fits: fits.map(({ store, fit }) => ({ store, fit })),
    history: history.map(presentHistory),
    notes,
  };
}

function presentHistory(row: StoredSalesRow) {
  return { store: row.store, ...presentSalesWeek(row) };
}

/** A plan's figures as the contract has them; what had to be left out is a flag. */
export function presentPrediction({ prediction, leftOut }: SavedPrediction): Prediction {
  const { money, flags, ...figures } = prediction;
  return {
    ...figures,
    netSales: money.netSales,
    grossMargin: money.grossMargin,
    netGain: money.netGain,
    breakEven: money.breakEven,
    flags: [
      ...flags,
      ...leftOut.map(({ store, weeks, reason }) => ({
        code: "left-out",
        driver: null,
        of: "plan" as const,
        stores: [store],
        weeks: [],
        detail: `${weeks === 1 ? "1 week" : `${weeks} weeks`} of store ${store} left out: ${reason}.`,
      })),
    ],
  };
}
