import { addWeeks, yearFraction } from "@shared/calendar";
import type { Day } from "@shared/calendar";
import { fitModel } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { defaultSpec, describeVariation, promotionOf, toModelData } from "@shared/planning";
import type { PlanCell, Promotion, SalesRow } from "@shared/planning";
import { aSalesRow } from "./a-sales-row";

/** True effects of the invented stores, on the log scale. */
export const truth = {
  elasticity: -2.2,
  perDegree: 0.025,
  promotion: { none: 0, feature: 0.4, display: 0.25, both: 0.7 } satisfies Record<Promotion, number>,
};

/** A seeded generator of uniform numbers from 0 to 1 (a 32-bit linear congruential generator, enough for test data). */
export function seededRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    return (state + 0.5) / 4_294_967_296;
  };
}

/** Three years of weeks with known effects and Poisson-like noise. */
export function inventedWeeks({ store, seed, level = 4 }: { store: string; seed: number; level?: number }): SalesRow[] {
  const random = seededRandom(seed);
  for (let warmUp = 0; warmUp < 10; warmUp++) random();
  return Array.from({ length: 156 }, (_, index) => {
    const week = addWeeks("2023-01-02", index);
    const regularPrice = index < 80 ? 1.79 : 1.89;
    const isCut = random() < 0.3;
    const price = isCut ? Math.round(regularPrice * (0.75 + 0.2 * random()) * 100) / 100 : regularPrice;
    const feature = random() < 0.18;
    const display = random() < 0.15;
    const temperatureC = 11 + 9 * Math.sin(2 * Math.PI * (yearFraction(week) - 0.3)) + 8 * (random() - 0.5);
    const mean = Math.exp(
      level + truth.elasticity * Math.log(price / 1.79) + truth.perDegree * (temperatureC - 11) +
        truth.promotion[promotionOf({ feature, display })],
    );
    const noise = random() + random() + random() + random() + random() + random() - 3;
    const units = Math.max(0, Math.round(mean + Math.sqrt(2 * mean) * noise * Math.SQRT2));
    const netSales = units * price;
    return aSalesRow({ store, week, units, netSales, price, shelfPrice: price, regularPrice, feature, display, temperatureC });
  });
}

/** The default model of an invented store, or another specification's. */
export function inventedModel(
  { store, seed, level, spec }: { store: string; seed: number; level?: number; spec?: ModelSpec },
): FittedModel {
  const { data } = toModelData(inventedWeeks({ store, seed, level }));
  return fitModel(spec ?? defaultSpec(describeVariation(data)).spec, data);
}

/** A store-week at regular price, without promotion, in normal weather, changed as a test needs it. */
export function aPlanCell(changes: Partial<PlanCell> = {}): PlanCell {
  return {
    store: "S1", week: "2026-06-08", regularPrice: 1.89, price: 1.89, promotion: "none", mechanic: "none", temperatureC: 16,
    normalTemperatureC: 16, event: null, unitCost: 0.9, taxRate: 0.21, ...changes,
  };
}

/** Cells of several stores over weeks in a row. */
export function planCells(
  { stores, weeks, first = "2026-06-08" }: { stores: readonly string[]; weeks: number; first?: Day },
  change: (cell: PlanCell, index: number) => Partial<PlanCell> = () => ({}),
): PlanCell[] {
  const inWeeks = Array.from({ length: weeks }, (_, index) => addWeeks(first, index));
  const cells = stores.flatMap((store) => inWeeks.map((week) => aPlanCell({ store, week })));
  return cells.map((cell, index) => ({ ...cell, ...change(cell, index) }));
}
