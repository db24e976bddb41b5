import type { EntityManager } from "@mikro-orm/postgresql";
import { addWeeks, weeksBetween, type Day } from "@shared/calendar";
import type { BaseCell } from "@shared/contract/scenarios";
import {
  findFits,
  readSalesRows,
  type LoadedModel,
  type StoredFit,
  type StoredSalesRow,
  type StoreReference,
} from "../../drivers";
import { baseCells } from "./base-cells";
import { contextNotes } from "./context-notes";
import {
  findEvents,
  findLastWeekBefore,
  findTemperatures,
  findTerms,
  findToldBefore,
  findToldWithin,
} from "./planned-weeks.repository";
import { storeNormals } from "./store-temperatures";

/** A year and a week, so that the same week of last year is among them. */
const historyWeeks = 53;

/** A plan's frame: its codes are found and its weeks are checked. */
export type PlanFrame = {
  productId: number;
  stores: readonly StoreReference[];
  weeks: { first: Day; last: Day };
  model: LoadedModel;
};

/** All that a plan is predicted from. */
export type PlanBase = { modelId: string; base: BaseCell[]; fits: StoredFit[]; notes: string[] };

/** What holds in each store-week of a plan before anything is planned, and the fits to predict it with. */
export async function planBase(em: EntityManager, { productId, stores, weeks, model }: PlanFrame): Promise<PlanBase> {
  const storeIds = stores.map(({ id }) => id);
  const regions = [...new Set(stores.map(({ region }) => region))];
  const within = await findToldWithin(em, { productId, storeIds, ...weeks });
  const before = await findToldBefore(em, { productId, storeIds, first: weeks.first });
  const terms = await findTerms(em, productId);
  const events = await findEvents(em, { regions, ...weeks });
  const normals = storeNormals(await findTemperatures(em, { productId, stores }));
  const fits = await findFits(em, { modelId: model.id, stores: stores.map(({ code }) => code) });

  const planned = weeksBetween(weeks.first, weeks.last);
  const base = baseCells({ stores, weeks: planned, toldBySales: [...before, ...within], terms, events, normals });
  const fitted = new Set(fits.map(({ store }) => store));
  const notes = contextNotes({
    base,
    withoutModel: stores.map(({ code }) => code).filter((code) => !fitted.has(code)),
    skipped: model.skipped,
    roughNormals: stores
      .filter((store) => planned.some((week) => normals(store, week).isRough))
      .map(({ code }) => code),
  });
  return { modelId: model.id, base, fits, notes };
}

/** The stores' last weeks before a plan, by store and week: 53 up to the last that was sold. */
export async function historyBefore(
  em: EntityManager,
  { productId, stores, weeks }: PlanFrame,
): Promise<StoredSalesRow[]> {
  const storeIds = stores.map(({ id }) => id);
  const last = await findLastWeekBefore(em, { productId, storeIds, first: weeks.first });
  if (last === null) return [];
  return readSalesRows(em, { productId, storeIds, first: addWeeks(last, 1 - historyWeeks), last });
}
