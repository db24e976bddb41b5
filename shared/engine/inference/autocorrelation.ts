import { numberColumn } from "../basis/columns";
import { EngineError } from "../errors";

export type AutocorrelationOptions = {
  /** Largest lag: a whole number of at least 1. */
  lags: number;
  /** Name of each row's series (a store), rows of one series in time order; by default all rows are one. */
  series?: readonly string[];
  /** Whole-numbered time of each row (a week), rising within a series; by default rows follow one another without gaps. */
  time?: readonly number[] | Float64Array;
};

export type LagCorrelation = {
  lag: number;
  /** From -1 to 1; null where no two rows are so far apart, or nothing varies. */
  estimate: number | null;
  /** Pairs of rows of one series, exactly so far apart. */
  pairs: number;
  /** What 95 in 100 estimates stay within where rows are independent; null without pairs. */
  lower: number | null;
  upper: number | null;
};

const normal95 = 1.959963984540054;

/**
 * Autocorrelation of residuals, pooled over series: at each lag the sum of products of deviations from the series' own means,
 * over the root of the product of both sides' sums of squares, over all pairs of rows of one series exactly that far apart in
 * time; gaps make fewer pairs. Bounds under independence are -+1.96 / sqrt(pairs). Taking out a mean pulls estimates down by about
 * one over the series' length.
 * Source: Box, Jenkins & Reinsel (2008), Time Series Analysis, 4th ed., sections 2.1.4 and 2.1.6.
 *
 * @param residuals one per row. Not changed.
 * @returns one entry per lag from 1.
 * @throws EngineError option-invalid, length-mismatch, column-kind, value-not-finite; value-out-of-range for times that do not rise.
 * Cost: O(n x lags).
 * @example autocorrelation(residuals(model, data), { lags: 8, series: data.store, time: data.weekIndex })[0].estimate;
 */
export function autocorrelation(
  residuals: readonly number[] | Float64Array, { lags, series, time }: AutocorrelationOptions,
): LagCorrelation[] {
  if (!Number.isInteger(lags) || lags < 1) throw new EngineError("option-invalid", `lags is ${lags}; it must be a whole number of at least 1.`);
  const values = numberColumn({ residuals }, "residuals", "autocorrelation");
  checkLength("series", series, values.length);
  checkLength("time", time, values.length);
  const times = time === undefined ? null : numberColumn({ time }, "time", "autocorrelation");
  const runs = rowsOfSeries(values.length, series).map((rows) => runOf(rows, { values, times, series }));
  return Array.from({ length: lags }, (_, k) => correlationAt(k + 1, runs));
}

function checkLength(name: string, column: { length: number } | undefined, length: number): void {
  if (column === undefined || column.length === length) return;
  throw new EngineError("length-mismatch", `${name} has ${column.length} rows, residuals has ${length}; both must have the same length.`);
}

function rowsOfSeries(count: number, series: readonly string[] | undefined): number[][] {
  const all = Array.from({ length: count }, (_, row) => row);
  if (series === undefined) return [all];
  const rowsOf = new Map<string, number[]>();
  for (const row of all) {
    const rows = rowsOf.get(series[row]);
    if (rows === undefined) rowsOf.set(series[row], [row]);
    else rows.push(row);
  }
  return [...rowsOf.values()];
}

/** Deviations from the series' mean, at rising times. */
type Run = { times: Float64Array; deviations: Float64Array };

function runOf(
  rows: readonly number[], of: { values: Float64Array; times: Float64Array | null; series: readonly string[] | undefined },
): Run {
  const { values, times, series } = of;
  const mean = rows.reduce((sum, row) => sum + values[row], 0) / rows.length;
  const own = Float64Array.from(rows, (row, place) => (times === null ? place : times[row]));
  rows.forEach((row, place) => {
    if (!Number.isInteger(own[place])) {
      throw new EngineError("value-out-of-range", `time must be whole numbers; row ${row + 1} is ${own[place]}.`);
    }
    if (place > 0 && !(own[place] > own[place - 1])) {
      const within = series === undefined ? "" : ` within series "${series[row]}"`;
      throw new EngineError("value-out-of-range", `time must rise${within}; row ${row + 1} is ${own[place]}, after ${own[place - 1]}.`);
    }
  });
  return { times: own, deviations: Float64Array.from(rows, (row) => values[row] - mean) };
}

function correlationAt(lag: number, runs: readonly Run[]): LagCorrelation {
  let [pairs, products, earlierSquares, laterSquares] = [0, 0, 0, 0];
  for (const { times, deviations } of runs) {
    let earlier = 0;
    for (let later = 0; later < times.length; later++) {
      while (times[earlier] < times[later] - lag) earlier++;
      if (times[earlier] !== times[later] - lag) continue;
      pairs++;
      products += deviations[earlier] * deviations[later];
      earlierSquares += deviations[earlier] ** 2;
      laterSquares += deviations[later] ** 2;
    }
  }
  const scale = Math.sqrt(earlierSquares) * Math.sqrt(laterSquares);
  const bound = pairs > 0 ? normal95 / Math.sqrt(pairs) : null;
  return {
    lag, pairs,
    estimate: scale > 0 ? Math.max(-1, Math.min(1, products / scale)) : null,
    lower: bound === null ? null : -bound,
    upper: bound,
  };
}
