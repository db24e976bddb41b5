import { bandModel, fitModel, termCurve } from "@shared/engine";
import type { FittedModel } from "@shared/engine";
import { defaultSpec, describeVariation, elasticityAt, predictScenario, shownModel, toModelData } from "@shared/planning";
import type { Interval, PlanCell } from "@shared/planning";
import { cutPlan, lastRegularPrice, simulatedStore } from "./simulated-chain";
import type { ChainShape, SimulatedStore } from "./simulated-chain";

export type LiftStudy = { shape: ChainShape; sets: number; stores: number; levels: readonly number[]; seed: number };

/**
 * Ways to make intervals of one fit: as fitted, with penalties taken as known; averaged over penalties with stores taken as
 * independent; as pages show them.
 */
export const bandings = {
  "penalties known": (model) => bandModel(model, "pointwise"),
  // Called pointwise, so that sums over stores find nothing in it that stores have in common.
  "stores independent": (model) => ({ ...shownModel(model), band: "pointwise" }),
  shown: shownModel,
} as const satisfies Record<string, (model: FittedModel) => FittedModel>;

export type Banding = keyof typeof bandings;
const bandingNames = Object.keys(bandings) as Banding[];

/** Shares of intervals that held the truth, and mean widths of the lift's; of one store (all its places, for the curve) and of all together. */
const figureNames = ["curve", "elasticity", "lift", "units", "lift of all", "units of all", "width of lift", "width of lift of all"] as const;
export type LiftCoverage = Record<(typeof figureNames)[number], number>;

type Simulated = SimulatedStore & { model: FittedModel };

/**
 * How often the intervals that pages show hold the truth of simulated stores whose price is cut by a fifth for 12 weeks.
 *
 * @returns per level and banding. O(sets x stores) fits.
 */
export function liftStudy({ shape, sets, stores, levels, seed }: LiftStudy): Map<number, Record<Banding, LiftCoverage>> {
  const judged = Array.from({ length: sets }, (_, set) => {
    const chain = Array.from({ length: stores }, (_store, index) => simulated({ store: `S${index + 1}`, seed: seed + 1000 * set + index, shape }));
    const cells = cutPlan(chain.map(({ store }) => store));
    const sold = cells.map((cell) => storeOf(chain, cell).draw(storeOf(chain, cell).mean(cell)));
    const banded = perBanding((banding) => chain.map((store) => ({ ...store, model: bandings[banding](store.model) })));
    return levels.map((level) => perBanding((banding) => judge(banded[banding], { cells, sold, level })));
  });
  return new Map(levels.map((level, at) => [level, perBanding((banding) => meanOf(judged.map((set) => set[at][banding])))]));
}

const perBanding = <Value>(of: (banding: Banding) => Value): Record<Banding, Value> =>
  Object.fromEntries(bandingNames.map((banding) => [banding, of(banding)])) as Record<Banding, Value>;

const meanOf = (all: readonly LiftCoverage[]): LiftCoverage =>
  Object.fromEntries(figureNames.map((name) => [name, all.reduce((sum, one) => sum + one[name], 0) / all.length])) as LiftCoverage;

function simulated(of: { store: string; seed: number; shape: ChainShape }): Simulated {
  const store = simulatedStore(of);
  const { data } = toModelData(store.rows);
  return { ...store, model: fitModel(defaultSpec(describeVariation(data)).spec, data) };
}

function storeOf<Store extends SimulatedStore>(chain: readonly Store[], { store }: PlanCell): Store {
  const found = chain.find((one) => one.store === store);
  if (found === undefined) throw new Error(`There is no store ${store}.`);
  return found;
}

/** Cells, what each of them sold, and the level of the intervals. */
type Plan = { cells: readonly PlanCell[]; sold: readonly number[]; level: number };

function judge(chain: readonly Simulated[], plan: Plan): LiftCoverage {
  const together = heldBy(chain, plan);
  return meanOf(chain.map((one): LiftCoverage => {
    const own = plan.cells.flatMap((cell, index) => (cell.store === one.store ? [index] : []));
    const alone = heldBy([one], { level: plan.level, cells: own.map((index) => plan.cells[index]), sold: own.map((index) => plan.sold[index]) });
    return {
      curve: curveHeld(one, plan.level), elasticity: elasticityHeld(one, plan.level),
      lift: alone.lift, units: alone.units, "lift of all": together.lift, "units of all": together.units,
      "width of lift": alone.width, "width of lift of all": together.width,
    };
  }));
}

const holds = ({ lower, upper }: { lower: number; upper: number }, value: number) => Number(lower <= value && value <= upper);

function heldBy(chain: readonly Simulated[], { cells, sold, level }: Plan): { lift: number; units: number; width: number } {
  const { lift, units } = predictScenario({ stores: chain.map(({ store, model }) => ({ store, model })), cells, level });
  let [plan, base] = [0, 0];
  for (const cell of cells) {
    plan += storeOf(chain, cell).mean(cell);
    base += storeOf(chain, cell).mean({ ...cell, price: cell.regularPrice });
  }
  return { lift: holds(lift, plan / base - 1), units: holds(units, sold.reduce((sum, value) => sum + value, 0)), width: lift.upper - lift.lower };
}

/** A store's true effect of a price, but for a constant. */
const effectOf = ({ mean }: SimulatedStore) => (price: number) =>
  Math.log(mean({ week: "2026-01-05", price, promotion: "none", temperatureC: 10 }));

/** The elasticity in the middle of the cut. */
function elasticityHeld(one: Simulated, level: number): number {
  const [price, step, effect] = [0.9 * lastRegularPrice, 1e-4, effectOf(one)];
  const truth = (effect(price * Math.exp(step)) - effect(price * Math.exp(-step))) / (2 * step);
  const interval: Interval | null = elasticityAt({ stores: [{ store: one.store, model: one.model, baseUnits: 1 }], price, level });
  return interval === null ? NaN : holds(interval, truth);
}

/** Share of the price curve inside its band, both centred over the weeks learnt from. */
function curveHeld(one: Simulated, level: number): number {
  const effect = effectOf(one);
  const middle = one.rows.reduce((sum, { price }) => sum + effect(price ?? NaN), 0) / one.rows.length;
  const { x, lower, upper } = termCurve(one.model, "price", { points: 60, level });
  return Array.from(x, Number).reduce((sum, price, k) => sum + holds({ lower: lower[k], upper: upper[k] }, effect(price) - middle), 0) / x.length;
}
