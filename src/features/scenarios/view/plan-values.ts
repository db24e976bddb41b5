import type { PlanCell } from "@shared/planning";
import { sharedValue } from "@shared/planning";

/** What a lane's slider stands for: one value, or the mean and ends of values that differ. */
export type LaneNumber = { value: number; mixed?: readonly [number, number] };

const meanOf = (values: readonly number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;

/** Null where no store-week has a value. */
export function laneNumber(values: readonly number[]): LaneNumber | null {
  const shared = sharedValue(values);
  if (shared.kind === "none") return null;
  if (shared.kind === "same") return { value: shared.value };
  return { value: meanOf(values), mixed: [shared.values[0], shared.values[shared.values.length - 1]] };
}

/** The level all store-weeks have, or null where they differ. */
export function laneLevel(values: readonly string[]): string | null {
  const shared = sharedValue(values);
  return shared.kind === "same" ? shared.value : null;
}

const isNumber = (value: number | null): value is number => value !== null;

export const pricesOf = (cells: readonly PlanCell[]) => cells.map((cell) => cell.price);
export const regularPricesOf = (cells: readonly PlanCell[]) => cells.map((cell) => cell.regularPrice);
export const temperaturesOf = (cells: readonly PlanCell[]) =>
  cells.map((cell) => cell.temperatureC ?? cell.normalTemperatureC).filter(isNumber);
export const normalTemperaturesOf = (cells: readonly PlanCell[]) => cells.map((cell) => cell.normalTemperatureC).filter(isNumber);
