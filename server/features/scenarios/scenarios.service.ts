import type { EntityManager } from "@mikro-orm/postgresql";
import { randomUUID } from "node:crypto";
import type { ScenarioDraft } from "@shared/contract/scenarios";
import { notFound } from "../../errors";
import type { Caller } from "../../http/route";
import { audit, PersonEntity } from "../accounts";
import { ProductEntity } from "../catalogue";
import { checkDraft, type CheckedDraft } from "./draft/check-draft";
import { changedMeanwhile, versionFrom } from "./scenario-version";
import { ScenarioEntity, type ScenarioRow } from "./scenarios.entities";
import { requireEditable, requireMayDelete } from "./scenarios.policy";
import { findScenario, findScenarios, type ScenarioPlace } from "./scenarios.repository";

/** Who acts, for the audit trail; a person's id is enough outside requests. */
export type Actor = { personId: string; tokenId?: string | null; requestId?: string | null };

/** @throws ProblemError 404 where there is no such scenario. */
export async function readScenario(em: EntityManager, id: string): Promise<ScenarioRow> {
  const scenario = await findScenario(em, id);
  if (!scenario) throw notFound("scenario");
  return scenario;
}

/** A page of scenarios, last changed first, and the place to go on from where there are more. */
export async function listScenarios(
  em: EntityManager,
  { product, after, limit }: { product?: string; after?: ScenarioPlace; limit: number },
): Promise<{ scenarios: ScenarioRow[]; next: ScenarioPlace | null }> {
  const found = await findScenarios(em, { product, after, limit });
  const scenarios = found.slice(0, limit);
  const last = scenarios[scenarios.length - 1];
  return { scenarios, next: found.length > limit && last ? { updatedAt: last.updatedAt, id: last.id } : null };
}

/**
 * Saves a new draft, to be predicted with the product's model in use unless it names another, and flushes.
 *
 * @throws ProblemError 422 that names what is wrong with the draft.
 */
export async function createScenario(
  { em, draft, now, ...actor }: Actor & { em: EntityManager; draft: ScenarioDraft; now: Date },
): Promise<ScenarioRow> {
  const checked = await checkDraft(em, draft);
  const person = em.getReference(PersonEntity, actor.personId);
  const id = randomUUID();
  const scenario = em.create(ScenarioEntity, {
    id,
    ...contentOf(em, checked),
    cells: draft.cells,
    state: "draft",
    createdBy: person,
    createdAt: now,
    updatedBy: person,
    updatedAt: now,
  });
  em.persist(scenario);
  audit(em, {
    ...actor,
    action: "scenario.created",
    subject: { kind: "scenario", id },
    detail: { product: checked.product.code },
  });
  await em.flush();
  em.clear();
  return readScenario(em, id);
}

type Save = { id: string; draft: ScenarioDraft; ifMatch?: string; now: Date };

/**
 * Saves a scenario over the version it was read at. Pages save by themselves every few seconds: the version, its time and
 * its author say who changed it last, and the audit trail is left to what people decide.
 *
 * @throws ProblemError 428 without If-Match, 412 where someone saved meanwhile, 409 where it is no longer being written,
 * 422 for a draft that cannot be used.
 */
export async function saveScenario(
  em: EntityManager,
  { id, draft, ifMatch, personId, now }: Pick<Actor, "personId"> & Save,
): Promise<ScenarioRow> {
  const scenario = await readScenario(em, id);
  const { version, updatedBy, updatedAt } = scenario;
  if (versionFrom(ifMatch) !== version) throw changedMeanwhile({ version, by: updatedBy.name, at: updatedAt });
  requireEditable(scenario);
  const checked = await checkDraft(em, draft, { modelId: scenario.model.id, product: scenario.product.code });
  em.assign(scenario, {
    ...contentOf(em, checked),
    updatedBy: em.getReference(PersonEntity, personId),
    updatedAt: now,
  });
  scenario.cells.set(draft.cells);
  // The database compares the version once more: of two saves at the same moment one gets 412.
  await em.flush();
  em.clear();
  return readScenario(em, id);
}

/** Deletes one's own draft. @throws ProblemError 404, 403 for another person's, 409 for more than a draft. */
export async function deleteScenario(
  em: EntityManager,
  { id, caller, requestId }: { id: string; caller: Caller; requestId: string },
): Promise<void> {
  const scenario = await readScenario(em, id);
  requireMayDelete(caller, scenario);
  em.remove(scenario);
  const { personId, tokenId } = caller;
  audit(em, {
    personId,
    tokenId,
    requestId,
    action: "scenario.deleted",
    subject: { kind: "scenario", id },
    detail: { name: scenario.name },
  });
  await em.flush();
}

function contentOf(em: EntityManager, { draft, product, model }: CheckedDraft) {
  return {
    name: draft.name,
    product: em.getReference(ProductEntity, product.id),
    model,
    stores: [...draft.stores],
    firstWeek: draft.weeks.first,
    lastWeek: draft.weeks.last,
    fixedCost: draft.fixedCost,
  };
}
