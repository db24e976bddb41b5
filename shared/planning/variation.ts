import type { ModelData } from "../engine";

/** How often each level of a factor was seen. */
export type LevelCounts = Record<string, number>;

/** How much the weeks of one series have to teach, driver by driver. */
export type Variation = {
  /** Weeks that can be learnt from. */
  weeks: number;
  /** Weeks from the first to the last, gaps included. */
  weeksSpanned: number;
  unitsSold: number;
  /** Distinct prices, to 4 decimals. */
  distinctPrices: number;
  /** Distinct temperatures, to a tenth of a degree; null where temperatures are not known. */
  distinctTemperatures: number | null;
  promotion: LevelCounts;
  mechanic: LevelCounts;
  event: LevelCounts;
};

/**
 * Counts what varied in the columns of one store's product, as `toModelData` makes them.
 *
 * @example describeVariation(toModelData(rows).data).distinctPrices // 5
 */
export function describeVariation(data: ModelData): Variation {
  const units = numbersOf(data.units);
  const weeks = numbersOf(data.weekIndex);
  return {
    weeks: units.length,
    weeksSpanned: weeks.length > 0 ? Math.max(...weeks) - Math.min(...weeks) + 1 : 0,
    unitsSold: units.reduce((total, value) => total + value, 0),
    distinctPrices: distinct(numbersOf(data.price), 1e4),
    distinctTemperatures: data.temperatureC === undefined ? null : distinct(numbersOf(data.temperatureC), 10),
    promotion: levelCounts(data.promotion),
    mechanic: levelCounts(data.mechanic),
    event: levelCounts(data.event),
  };
}

function numbersOf(column: ModelData[string] | undefined): number[] {
  return Array.from<number | string>(column ?? []).map(Number);
}

function distinct(values: readonly number[], perUnit: number): number {
  return new Set(values.map((value) => Math.round(value * perUnit))).size;
}

function levelCounts(column: ModelData[string] | undefined): LevelCounts {
  const counts: LevelCounts = {};
  for (const level of column ?? []) counts[level] = (counts[level] ?? 0) + 1;
  return counts;
}
