import type { EntityManager } from "@mikro-orm/postgresql";
import type { changedStoreSchema, newStoreSchema } from "@shared/contract/catalogue-stores";
import type { z } from "zod";
import { conflict } from "../../../errors";
import { StoreEntity, type Store } from "../catalogue.entities";
import { versionOfStore } from "../catalogue.presenter";
import type { Write } from "../changes/author";
import { codeTaken } from "../changes/code-taken";
import { changing } from "../changes/catalogue-lock.repository";
import { recordChange } from "../changes/record-change";
import { requireSeen } from "../changes/versions";
import { findStoreAt, requireStoreAt } from "../codes-named.repository";
import { storeValues } from "../describe";
import { findLastChange } from "../history/history.repository";
import { referencesToStore } from "../references.repository";

type Code = { code: string; write: Write };

/** Enters a store. @throws ProblemError 409 where its code is taken. */
export function createStore(em: EntityManager, { store, write }: { store: z.output<typeof newStoreSchema>; write: Write }): Promise<Store> {
  return changing(em, async (inner) => {
    if (await findStoreAt(inner, store.code)) throw codeTaken("store", store.code);
    const row = inner.create(StoreEntity, store);
    inner.persist(row);
    recordChange(inner, { by: write.by, what: "store", code: store.code, before: null, after: storeValues(row) });
    return row;
  });
}

/** Changes a store. @throws ProblemError 404, or 412 where someone changed it after the caller had read it. */
export function changeStore(em: EntityManager, { code, store, write }: Code & { store: z.output<typeof changedStoreSchema> }): Promise<Store> {
  return changing(em, async (inner) => {
    const row = await seenStore(inner, { code, write });
    const before = storeValues(row);
    inner.assign(row, store);
    recordChange(inner, { by: write.by, what: "store", code, before, after: storeValues(row) });
    return row;
  });
}

/**
 * Removes a store that nothing refers to: one entered by mistake. Others get a closing day.
 *
 * @throws ProblemError 404, 412, or 409 that says what refers to it.
 */
export function removeStore(em: EntityManager, { code, write }: Code): Promise<void> {
  return changing(em, async (inner) => {
    const row = await seenStore(inner, { code, write });
    const references = await referencesToStore(inner, row);
    if (references !== null) throw conflict("in-use", `${code} cannot be removed: ${references}. Give it a last day of trade instead.`);
    inner.remove(row);
    recordChange(inner, { by: write.by, what: "store", code, before: storeValues(row), after: null });
  });
}

async function seenStore(em: EntityManager, { code, write }: Code): Promise<Store> {
  const row = await requireStoreAt(em, code);
  await requireSeen({
    seen: write.seen, version: versionOfStore(row), what: `store ${code}`,
    lastChange: () => findLastChange(em, { kind: "store", what: "store", code }),
  });
  return row;
}
