import type { EntityManager } from "@mikro-orm/postgresql";
import { setImmediate } from "node:timers/promises";
import { serialiseModel, type ModelSpec } from "@shared/engine";
import { unusable } from "../../../errors";
import type { SkippedStore } from "../drivers.entities";
import { readSalesRows, type StoredSalesRow } from "../sales/sales.repository";
import { fitStore } from "./fit-store";
import { reasonOf } from "./fit-problem";
import { findFittedStoreIds, insertFit, markFitted } from "./models.repository";
import { within, type StoreKey } from "./new-model";
import { useFirstModel } from "./use-model";

/** Stores whose weeks are read at once: enough to spare round trips, little enough for any memory. */
const storesAtOnce = 20;

export type ModelToFit = {
  id: string;
  productId: number;
  productCode: string;
  spec: ModelSpec | null;
  weeks?: { first: string; last: string };
};

export type FitOutcome = { fitted: number; skipped: SkippedStore[] };

type Work = {
  em: EntityManager;
  model: ModelToFit;
  stores: readonly StoreKey[];
  at: Date;
  /** Told after each store; throws to stop the work. */
  onStore?: (done: { done: number; total: number; store: string }) => Promise<void>;
};

/**
 * Fits every store of a model apart and writes each fit at once, so that a run begun again goes on where the last one
 * ended. A store that cannot be fitted is skipped with the reason. Other requests get their turn between stores.
 *
 * @throws ProblemError 422 "nothing-fitted" where no store could be fitted.
 */
export async function fitStores({ em, model, stores, at, onStore }: Work): Promise<FitOutcome> {
  const done = await findFittedStoreIds(em, model.id);
  const skipped: SkippedStore[] = [];
  for (let from = 0; from < stores.length; from += storesAtOnce) {
    const batch = stores.slice(from, from + storesAtOnce);
    const weeks = await weeksOf(
      em,
      model,
      batch.filter((store) => !done.has(store.id)),
    );
    for (const [index, store] of batch.entries()) {
      if (!done.has(store.id)) {
        const reason = await fitAndWrite({ em, model, store, weeks: weeks.get(store.code) ?? [], at });
        if (reason !== null) skipped.push({ store: store.code, reason });
      }
      await onStore?.({ done: from + index + 1, total: stores.length, store: store.code });
      await setImmediate();
    }
  }
  const fitted = stores.length - skipped.length;
  if (fitted === 0)
    throw unusable(
      "nothing-fitted",
      `None of ${stores.length} stores could be fitted. ${skipped[0].store}: ${skipped[0].reason}`,
    );
  await finish({ em, model, skipped, at });
  return { fitted, skipped };
}

async function weeksOf(
  em: EntityManager,
  model: ModelToFit,
  stores: readonly StoreKey[],
): Promise<Map<string, StoredSalesRow[]>> {
  const rows = await readSalesRows(em, {
    productId: model.productId,
    storeIds: stores.map((store) => store.id),
    ...model.weeks,
  });
  const byStore = new Map<string, StoredSalesRow[]>(stores.map((store) => [store.code, []]));
  for (const row of rows) byStore.get(row.store)?.push(row);
  return byStore;
}

/** The reason why a store could not be fitted; null where it was. */
async function fitAndWrite(
  { em, model, store, weeks, at }: {
    em: EntityManager; model: ModelToFit; store: StoreKey; weeks: StoredSalesRow[]; at: Date;
  },
): Promise<string | null> {
  if (weeks.length === 0) return noWeeks({ store: store.code, product: model.productCode, weeks: model.weeks });
  try {
    const { model: fitted, summary } = fitStore({ store: store.code, weeks, spec: model.spec });
    await insertFit(em, { modelId: model.id, storeId: store.id, text: serialiseModel(fitted), summary, at });
    return null;
  } catch (error) {
    const reason = reasonOf(error);
    if (reason === undefined) throw error;
    return reason;
  }
}

/** Why there is nothing to fit, for one store. */
export function noWeeks(
  { store, product, weeks }: { store: string; product: string; weeks?: { first: string; last: string } },
): string {
  return `Store "${store}" has no weeks of product "${product}"${within(weeks)}.`;
}

async function finish(
  { em, model, skipped, at }: { em: EntityManager; model: ModelToFit; skipped: SkippedStore[]; at: Date },
): Promise<void> {
  await em.transactional(async (inner) => {
    const isFirstTime = await markFitted(inner, { modelId: model.id, skipped, at });
    if (isFirstTime)
      await useFirstModel(inner, { modelId: model.id, productId: model.productId, spec: model.spec, at });
  });
}
