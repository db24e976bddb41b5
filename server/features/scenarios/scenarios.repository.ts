import type { EntityManager } from "@mikro-orm/postgresql";
import type { PlanCell } from "@shared/contract/scenarios";
import { ScenarioEntity, type ScenarioRow } from "./scenarios.entities";

/** A scenario with all that is shown of it. */
export async function findScenario(em: EntityManager, id: string): Promise<ScenarioRow | null> {
  return em.findOne(ScenarioEntity, { id }, { populate: ["product", "model", "createdBy", "updatedBy", "cells"] });
}

/** The cells of a scenario that `findScenario` read; lists leave them out. */
export function cellsOf(scenario: ScenarioRow): PlanCell[] {
  const cells = scenario.cells.unwrap();
  if (cells === undefined) throw new Error(`The cells of scenario ${scenario.id} were not read.`);
  return cells;
}

/** Place in the list: what was changed last comes first. */
export type ScenarioPlace = { updatedAt: Date; id: string };

/** Scenarios without their cells, last changed first, from after a place on; one more than the limit where there are more. */
export async function findScenarios(
  em: EntityManager,
  { product, after, limit }: { product?: string; after?: ScenarioPlace; limit: number },
): Promise<ScenarioRow[]> {
  const older = after && {
    $or: [{ updatedAt: { $lt: after.updatedAt } }, { updatedAt: after.updatedAt, id: { $lt: after.id } }],
  };
  return em.find(
    ScenarioEntity,
    { ...(product !== undefined && { product: { code: product } }), ...older },
    {
      populate: ["product", "model", "createdBy", "updatedBy"],
      orderBy: { updatedAt: "desc", id: "desc" },
      limit: limit + 1,
    },
  );
}
