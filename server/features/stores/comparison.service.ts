import type { EntityManager } from "@mikro-orm/postgresql";
import { setImmediate } from "node:timers/promises";
import type { FittedModel } from "@shared/engine";
import { bandOf, driverOfTerm, readFit, type ShownBand } from "@shared/planning";
import { hasOneCurve, requireProduct, storesThatSold, type DriverCurve, type SellingStore, type StoredFit } from "../drivers";
import { anchorPrice } from "./anchor-price";
import { chainCurve, type ChainCurve, type WeightedCurve } from "./chain-curve";
import { commonGrid } from "./common-grid";
import { fitsToCompare, type ComparedModel } from "./compared-model";
import { storeCurve } from "./store-curve";

export type ComparisonRequest = {
  product: string;
  driver: string;
  level: number;
  points: number;
  anchor?: number;
  model?: string;
  now: Date;
};

export type ComparedStore = {
  store: Pick<SellingStore, "code" | "name" | "region" | "meanWeeklyUnits">;
  /** Null with the reason where the store could not learn the driver. */
  learnt: WeightedCurve | null;
  reason: string | null;
};

export type ComparisonOutcome = {
  product: string;
  modelId: string;
  driver: string;
  level: number;
  band: ShownBand;
  anchor: number | null;
  stores: ComparedStore[];
  chain: ChainCurve | null;
};

type Learner = { stored: StoredFit; model: FittedModel; term: DriverCurve["term"] | undefined };

/**
 * One driver's curve of a product for all its stores on common values, relative to a common anchor price for the price
 * driver; with the chain's own curve, and for stores without a curve the reason.
 *
 * @throws ProblemError 422 for an unknown product, or one without a model in use; 404 for an unknown model.
 */
export async function compareStores(em: EntityManager, request: ComparisonRequest): Promise<ComparisonOutcome> {
  const product = await requireProduct(em, request.product);
  const compared = await fitsToCompare(em, { product, modelId: request.model });
  const sellers = await storesThatSold(em, { productId: product.id, ...compared.weeks });
  const learners = await learnersOf(compared.fits, request.driver);
  const terms = [...learners.values()].map(({ term }) => term).filter((term) => term !== undefined);
  const isPrice = terms.some(({ columns }) => columns[0] === "price");
  const anchor = isPrice
    ? (request.anchor ?? (await anchorPrice(em, { productId: product.id, terms, now: request.now })))
    : null;
  const grid = terms.length > 0 ? commonGrid(terms, request.points) : [];

  const frame = { compared, grid, anchor, request };
  const stores: ComparedStore[] = [];
  for (const seller of sellers) {
    stores.push(compareStore(seller, learners.get(seller.code), frame));
    // Other requests get their turn: a large chain takes a second.
    await setImmediate();
  }
  const curves = stores.map(({ learnt }) => learnt).filter((learnt) => learnt !== null);
  const models = [...learners.values()].map(({ model }) => model);
  const isLog = models.every(({ spec }) => spec.family !== "gaussian");
  const { driver, level } = request;
  const chain = chainCurve({ curves, grid, isLog, level });
  return { product: product.code, modelId: compared.id, driver, level, band: bandOf(models), anchor, stores, chain };
}

/** What each fitted store learnt, by its code. */
async function learnersOf(fits: readonly StoredFit[], driver: string): Promise<Map<string, Learner>> {
  const learners = new Map<string, Learner>();
  for (const stored of fits) {
    const model = readFit(stored.fit);
    const curves = model.terms.filter(hasOneCurve);
    const ofDriver = curves.find((term) => driverOfTerm(term) === driver);
    learners.set(stored.store, { stored, model, term: ofDriver ?? curves.find(({ id }) => id === driver) });
    await setImmediate();
  }
  return learners;
}

/** What all stores of a comparison have in common. */
type Frame = {
  compared: ComparedModel;
  grid: number[] | string[];
  anchor: number | null;
  request: ComparisonRequest;
};

function compareStore(seller: SellingStore, learner: Learner | undefined, frame: Frame): ComparedStore {
  const { grid, anchor, request } = frame;
  if (!learner?.term) return { store: seller, learnt: null, reason: whyNot(seller, learner, frame) };
  const { model, term } = learner;
  const { meanWeeklyUnits, meanBaseUnits } = learner.stored.summary;
  const curve = storeCurve({ model, term, grid, anchor, level: request.level });
  // A store that sold nothing at base counts for nothing, but must not make the chain's mean undefined.
  const baseUnits = Math.max(meanBaseUnits ?? meanWeeklyUnits, Number.MIN_VALUE);
  return { store: { ...seller, meanWeeklyUnits }, learnt: { ...curve, baseUnits, meanWeeklyUnits }, reason: null };
}

function whyNot(seller: SellingStore, learner: Learner | undefined, { compared, request }: Frame): string {
  if (learner) {
    const leftOut = learner.stored.summary.leftOut.find(({ driver }) => driver === request.driver);
    return leftOut?.reason ?? `The model has no ${request.driver} term.`;
  }
  const skipped = compared.skipped.find(({ store }) => store === seller.code);
  return skipped?.reason ?? "This store is not in the model. Fit all stores of the product.";
}
