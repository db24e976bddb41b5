import { addWeeks, yearFraction } from "@shared/calendar";
import { promotionOf } from "@shared/planning";
import type { PlanCell, Promotion, SalesRow } from "@shared/planning";
import { gammaDraw, poissonDraw } from "../engine/support/draws";
import { seededUniform } from "../engine/support/generator";
import { aSalesRow } from "./a-sales-row";
import { planCells } from "./an-invented-store";

/** Effects of a price on the log scale, by its ratio to the last regular price; `place` shifts what has a place. */
const priceCurves = {
  straight: (ratio: number) => -2.2 * Math.log(ratio),
  gentle: (ratio: number) => -1.6 * Math.log(ratio) + 1.2 * Math.log(ratio) ** 2,
  threshold: (ratio: number, place: number) => -1.2 * Math.log(ratio) - 0.2 * Math.tanh((ratio - 0.85 - place) / 0.08),
  saturating: (ratio: number, place: number) => 0.5 * (1 - Math.exp(-(1 - ratio) / (0.08 + place))),
};

export type ChainShape = keyof typeof priceCurves;

/** What a simulated store does: expected units of a cell, weeks of sales, and a draw of what a cell sells. */
export type SimulatedStore = {
  store: string;
  rows: SalesRow[];
  mean: (cell: Pick<PlanCell, "week" | "price" | "promotion" | "temperatureC">) => number;
  draw: (mean: number) => number;
};

const promotions = { none: 0, feature: 0.4, display: 0.25, both: 0.6 } satisfies Record<Promotion, number>;
const regularPrices = [1.79, 1.85, 1.95];
const weeksOfSales = 156;
/** Variance over mean of weekly units. */
const dispersion = 2.5;
export const lastRegularPrice = regularPrices[regularPrices.length - 1];

/** Normal temperature of a week. */
const normalTemperature = (week: string) => 11 + 8 * Math.sin(2 * Math.PI * (yearFraction(week) - 0.3));

/**
 * Three years of a store with known effects, its own level and its own strength of price; cuts of 5 to 35 % in a quarter of
 * the weeks, half of them in the leaflet.
 */
export function simulatedStore({ store, seed, shape }: { store: string; seed: number; shape: ChainShape }): SimulatedStore {
  const uniform = seededUniform(seed);
  const [level, strength, place] = [4.4 + uniform(), 0.7 + 0.6 * uniform(), 0.06 * (uniform() - 0.5)];
  const curve = (price: number) => strength * priceCurves[shape](price / lastRegularPrice, place);
  const mean: SimulatedStore["mean"] = ({ week, price, promotion, temperatureC }) => {
    const year = 2 * Math.PI * yearFraction(week);
    return Math.exp(level + curve(price) + 0.25 * Math.sin(year) + 0.1 * Math.cos(2 * year)
      + 0.02 * (temperatureC ?? 0) + promotions[promotion]);
  };
  const draw = (expected: number) => poissonDraw(uniform, (dispersion - 1) * gammaDraw(uniform, expected / (dispersion - 1)));
  const rows = Array.from({ length: weeksOfSales }, (_, index): SalesRow => {
    const week = addWeeks("2023-01-02", index);
    const regularPrice = regularPrices[Math.floor((index * regularPrices.length) / weeksOfSales)];
    const isCut = uniform() < 0.25;
    const price = isCut ? Math.round(regularPrice * (0.65 + 0.3 * uniform()) * 100) / 100 : regularPrice;
    const feature = uniform() < (isCut ? 0.5 : 0.05);
    const display = uniform() < 0.12;
    const temperatureC = normalTemperature(week) + 8 * (uniform() - 0.5);
    const units = draw(mean({ week, price, promotion: promotionOf({ feature, display }), temperatureC }));
    return aSalesRow({ store, week, units, netSales: units * price, price, shelfPrice: price, regularPrice, feature, display, temperatureC });
  });
  return { store, rows, mean, draw };
}

/** A cut of the price by a fifth in twelve weeks after those of sales, in normal weather. */
export const cutPlan = (stores: readonly string[]): PlanCell[] =>
  planCells({ stores, weeks: 12, first: addWeeks("2023-01-02", weeksOfSales) }, ({ week }) => ({
    regularPrice: lastRegularPrice, price: 0.8 * lastRegularPrice,
    temperatureC: normalTemperature(week), normalTemperatureC: normalTemperature(week),
  }));
