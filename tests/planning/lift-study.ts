import { bandModel, fitModel, termCurve } from "@shared/engine";
import type { FittedModel, ModelBand } from "@shared/engine";
import { defaultSpec, describeVariation, elasticityAt, predictScenario, toModelData } from "@shared/planning";
import type { Interval, PlanCell, StoreModel } from "@shared/planning";
import { cutPlan, lastRegularPrice, simulatedStore } from "./simulated-chain";
import type { ChainShape, SimulatedStore } from "./simulated-chain";

export type LiftStudy = { shape: ChainShape; sets: number; stores: number; level: number; seed: number };

/** Shares of intervals that held the truth, over all sets (and stores, where it is of one store). */
export type LiftCoverage = {
  /** The price curve of one store between the deepest cut and the regular price, relative to nothing: as its lane is drawn. */
  curve: number;
  /** Of one store: elasticity in the middle of the cut, expected lift of a cut by a fifth, and what is sold under it. */
  elasticity: number;
  lift: number;
  units: number;
  /** The same of all stores together. */
  chainLift: number;
  chainUnits: number;
  /** Mean width of the lift's interval, of one store and of all together. */
  liftWidth: number;
  chainLiftWidth: number;
};

type Simulated = SimulatedStore & { model: FittedModel };

/** How often the intervals a scenario shows hold the truth of simulated stores, by the band their models have. */
export function liftStudy({ shape, sets, stores, level, seed }: LiftStudy, bands: readonly ModelBand[]): Record<string, LiftCoverage> {
  const held = Object.fromEntries(bands.map((band) => [band, [] as LiftCoverage[]]));
  for (let set = 0; set < sets; set++) {
    const chain = Array.from({ length: stores }, (_, index) => simulated({ store: `S${index + 1}`, seed: seed + 1000 * set + index, shape }));
    const cells = cutPlan(chain.map(({ store }) => store));
    const sold = cells.map((cell) => chain.find(({ store }) => store === cell.store)?.draw(meanOf(chain, cell)) ?? 0);
    for (const band of bands) held[band].push(judge(chain.map((store) => ({ ...store, model: bandModel(store.model, band) })), { cells, sold, level }));
  }
  return Object.fromEntries(bands.map((band) => [band, averageOf(held[band])]));
}

function simulated(of: { store: string; seed: number; shape: ChainShape }): Simulated {
  const store = simulatedStore(of);
  const { data } = toModelData(store.rows);
  return { ...store, model: fitModel(defaultSpec(describeVariation(data)).spec, data) };
}

const meanOf = (chain: readonly SimulatedStore[], cell: PlanCell) => chain.find(({ store }) => store === cell.store)?.mean(cell) ?? NaN;

type Plan = { cells: readonly PlanCell[]; sold: readonly number[]; level: number };

function judge(chain: readonly Simulated[], plan: Plan): LiftCoverage {
  const all = heldBy(chain, plan);
  const each = chain.map((one) => {
    const own = plan.cells.flatMap((cell, index) => (cell.store === one.store ? [index] : []));
    const alone = heldBy([one], { level: plan.level, cells: own.map((index) => plan.cells[index]), sold: own.map((index) => plan.sold[index]) });
    return { ...alone, elasticity: elasticityHeld(one, plan.level), curve: curveHeld(one, plan.level) };
  });
  const mean = (of: (one: (typeof each)[number]) => number) => each.reduce((sum, one) => sum + of(one), 0) / each.length;
  return {
    curve: mean(({ curve }) => curve), elasticity: mean(({ elasticity }) => elasticity), lift: mean(({ lift }) => lift), units: mean(({ units }) => units),
    chainLift: all.lift, chainUnits: all.units, liftWidth: mean(({ width }) => width), chainLiftWidth: all.width,
  };
}

const holds = ({ lower, upper }: { lower: number; upper: number }, value: number) => Number(lower <= value && value <= upper);

function heldBy(chain: readonly Simulated[], { cells, sold, level }: Plan): { lift: number; units: number; width: number } {
  const stores: StoreModel[] = chain.map(({ store, model }) => ({ store, model }));
  const { lift, units } = predictScenario({ stores, cells, level });
  const totals = { plan: 0, base: 0 };
  for (const cell of cells) {
    totals.plan += meanOf(chain, cell);
    totals.base += meanOf(chain, { ...cell, price: cell.regularPrice });
  }
  return {
    lift: holds(lift, totals.plan / totals.base - 1),
    units: holds(units, sold.reduce((sum, value) => sum + value, 0)),
    width: lift.upper - lift.lower,
  };
}

function elasticityHeld({ store, model, mean }: Simulated, level: number): number {
  const price = 0.9 * lastRegularPrice;
  const at = (value: number) => Math.log(mean({ week: "2026-01-05", price: value, promotion: "none", temperatureC: 10 }));
  const step = 1e-4;
  const truth = (at(price * Math.exp(step)) - at(price * Math.exp(-step))) / (2 * step);
  const interval: Interval | null = elasticityAt({ stores: [{ store, model, baseUnits: 1 }], price, level });
  return interval === null ? NaN : holds(interval, truth);
}

/** Share of the price curve inside its band, both centred over the weeks learnt from. */
function curveHeld({ model, mean, rows }: Simulated, level: number): number {
  const truth = (price: number) => Math.log(mean({ week: "2026-01-05", price, promotion: "none", temperatureC: 10 }));
  const middle = rows.reduce((sum, { price }) => sum + truth(price ?? NaN), 0) / rows.length;
  const { x, lower, upper } = termCurve(model, "price", { points: 60, level });
  return Array.from(x, Number).reduce((sum, price, k) => sum + holds({ lower: lower[k], upper: upper[k] }, truth(price) - middle), 0) / x.length;
}

function averageOf(all: readonly LiftCoverage[]): LiftCoverage {
  const mean = (of: (one: LiftCoverage) => number) => all.reduce((sum, one) => sum + of(one), 0) / all.length;
  return {
    curve: mean(({ curve }) => curve), elasticity: mean(({ elasticity }) => elasticity), lift: mean(({ lift }) => lift), units: mean(({ units }) => units),
    chainLift: mean(({ chainLift }) => chainLift), chainUnits: mean(({ chainUnits }) => chainUnits),
    liftWidth: mean(({ liftWidth }) => liftWidth), chainLiftWidth: mean(({ chainLiftWidth }) => chainLiftWidth),
  };
}
