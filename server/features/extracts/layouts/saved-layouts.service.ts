import type { EntityManager } from "@mikro-orm/postgresql";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Layout } from "@shared/contract/layouts";
import { missingColumns } from "@shared/layouts";
import { conflict, notFound, unusable, type ProblemError } from "../../../errors";
import { audit } from "../../accounts";
import { SavedLayoutEntity, type SavedLayout } from "../extracts.entities";
import type { Actor } from "../load/load-extract.service";
import { listOf } from "./layout-needed";
import { findSavedLayout, findSavedLayoutByName, findSavedLayouts, lockLayoutNames } from "./saved-layouts.repository";

type Named = { name: string; layout: Layout };
type Saving = Named & { actor: Actor; now: Date };

/** Saved layouts by name. */
export const listSavedLayouts = (em: EntityManager, kind?: ExtractKind): Promise<SavedLayout[]> => findSavedLayouts(em, kind);

/** Saves a layout. @throws ProblemError 409 where the name is taken, 422 where it lacks needed columns. */
export function createSavedLayout(em: EntityManager, { name, layout, actor, now }: Saving): Promise<SavedLayout> {
  requireComplete(layout);
  return em.transactional(async (inner) => {
    await lockLayoutNames(inner);
    if (await findSavedLayoutByName(inner, name)) throw nameTaken(name);
    return populated(inner, add(inner, { name, layout, actor, now }));
  });
}

/** Changes a saved layout; files read already stay as they are. @throws ProblemError 404, 409 where the name is taken, 422. */
export function changeSavedLayout(em: EntityManager, { id, name, layout, actor, now }: Saving & { id: string }): Promise<SavedLayout> {
  requireComplete(layout);
  return em.transactional(async (inner) => {
    await lockLayoutNames(inner);
    const saved = await findSavedLayout(inner, id);
    if (!saved) throw notFound("layout");
    const other = await findSavedLayoutByName(inner, name);
    if (other && other.id !== id) throw nameTaken(name);
    return populated(inner, change(inner, saved, { name, layout, actor, now }));
  });
}

/** Forgets a saved layout; files that were read by it keep their copy. @throws ProblemError 404. */
export function deleteSavedLayout(em: EntityManager, { id, actor }: { id: string; actor: Actor }): Promise<void> {
  return em.transactional(async (inner) => {
    const saved = await findSavedLayout(inner, id);
    if (!saved) throw notFound("layout");
    audit(inner, { ...actor, action: "layout.deleted", subject: { kind: "layout", id }, detail: { name: saved.name, kind: saved.kind } });
    inner.remove(saved);
  });
}

/**
 * Saves a layout under a name, in place of the one that has it. To be called in a transaction.
 *
 * @throws ProblemError 409 where the name is that of another kind of file's layout.
 */
export async function saveLayoutAs(em: EntityManager, saving: Saving): Promise<SavedLayout> {
  await lockLayoutNames(em);
  const existing = await findSavedLayoutByName(em, saving.name);
  if (!existing) return add(em, saving);
  if (existing.kind !== saving.layout.kind) throw nameTaken(saving.name);
  return change(em, existing, saving);
}

/**
 * The layout that an upload asks for by name.
 *
 * @throws ProblemError 422 where there is none of that name for this kind of file; the sentence has the known names.
 */
export async function requireLayoutByName(em: EntityManager, { name, kind }: { name: string; kind: ExtractKind }): Promise<SavedLayout> {
  const saved = await findSavedLayoutByName(em, name);
  if (saved?.kind === kind) return saved;
  const known = (await findSavedLayouts(em, kind)).map((layout) => `"${layout.name}"`);
  const is = saved ? `The layout "${name}" is for a ${saved.kind} file.` : `There is no saved layout "${name}".`;
  const instead = known.length > 0 ? `For ${kind} files there ${known.length === 1 ? "is" : "are"} ${listOf(known)}.` : `None is saved for ${kind} files yet: send the file without a layout.`;
  const detail = `${is} ${instead}`;
  throw unusable("unknown-layout", detail, [{ path: "layout", message: detail }]);
}

/** @throws ProblemError 422 where a layout maps nothing to a column that its kind of file needs. */
export function requireComplete(layout: Layout): void {
  const missing = missingColumns(layout);
  if (missing.length === 0) return;
  const detail = `A ${layout.kind} file needs ${listOf(missing)}: say which ${missing.length === 1 ? "column holds it" : "columns hold them"}.`;
  throw unusable("layout-incomplete", detail, missing.map((column) => ({ path: `layout.mapping.${column}`, message: `Say which column of the file is ${column}.` })));
}

function add(em: EntityManager, { name, layout, actor, now }: Saving): SavedLayout {
  const saved = em.create(SavedLayoutEntity, { name, kind: layout.kind, layout, updatedBy: actor.personId, updatedAt: now });
  em.persist(saved);
  note(em, saved, { actor, action: "layout.saved" });
  return saved;
}

function change(em: EntityManager, saved: SavedLayout, { name, layout, actor, now }: Saving): SavedLayout {
  const before = { name: saved.name, layout: saved.layout };
  em.assign(saved, { name, kind: layout.kind, layout, updatedBy: actor.personId, updatedAt: now }, { mergeObjectProperties: false });
  note(em, saved, { actor, action: "layout.changed", before });
  return saved;
}

function note(em: EntityManager, { id, name, kind, layout }: SavedLayout, { actor, action, before }: { actor: Actor; action: string; before?: Named }): void {
  audit(em, { ...actor, action, subject: { kind: "layout", id }, detail: { name, kind, ...(before && { before }), after: { name, layout } } });
}

async function populated(em: EntityManager, saved: SavedLayout): Promise<SavedLayout> {
  await em.flush();
  await em.populate(saved, ["updatedBy"]);
  return saved;
}

const nameTaken = (name: string): ProblemError => conflict("name-taken", `There is a layout "${name}" already. Choose another name, or change that one.`);
