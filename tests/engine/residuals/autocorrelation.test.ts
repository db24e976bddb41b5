import { autocorrelation } from "@shared/engine";
import type { AutocorrelationOptions } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";

const values = [0.3, -1.2, 0.8, 2.1, -0.4, 0.9, 1.7, -2.2, 0.1, 0.6];

describe("Autocorrelation", () => {
  it("of one series without gaps is the correlation of both sides about the series' mean (R 4.2.2, sums written out)", () => {
    const found = autocorrelation(values, { lags: 3 });
    [-0.253524788926, -0.396739022106, 0.57743226182].forEach((expected, k) => expect(found[k].estimate).toBeCloseTo(expected, 11));
    expect(found.map(({ lag, pairs }) => [lag, pairs])).toEqual([[1, 9], [2, 8], [3, 7]]);
  });

  it("has bounds of 1.96 / sqrt(pairs) either way", () => {
    const [{ lower, upper }] = autocorrelation(values, { lags: 1 });
    expect(upper).toBeCloseTo(1.959964 / 3, 6);
    expect(lower).toBe(-(upper ?? 0));
  });

  it("pairs only weeks that far apart: a gap makes fewer pairs, not nearer ones", () => {
    const time = [1, 2, 3, 7, 8, 10];
    const found = autocorrelation([1, -1, 2, -2, 1, -1], { lags: 4, time });
    // 1-2, 2-3, 7-8 | 1-3, 8-10 | 7-10 | 3-7.
    expect(found.map(({ pairs }) => pairs)).toEqual([3, 2, 1, 1]);
    expect(found[3].estimate).toBe(-1);
  });

  it("pairs only rows of one series, each about its own mean", () => {
    const shifted = [...values, ...values.map((value) => value + 100)];
    const series = [...values.map(() => "a"), ...values.map(() => "b")];
    const [alone, both] = [autocorrelation(values, { lags: 3 }), autocorrelation(shifted, { lags: 3, series })];
    both.forEach(({ estimate, pairs }, k) => {
      expect(pairs).toBe(2 * alone[k].pairs);
      expect(estimate).toBeCloseTo(alone[k].estimate ?? Number.NaN, 11);
    });
  });

  it("does not mind series that alternate", () => {
    const order = values.flatMap((_value, k) => [k, k + 10]);
    const all = [...values, ...values.map((value) => 3 * value)];
    const names = all.map((_value, k) => (k < 10 ? "a" : "b"));
    const mixed = autocorrelation(order.map((k) => all[k]), { lags: 2, series: order.map((k) => names[k]) });
    const sorted = autocorrelation(all, { lags: 2, series: names });
    expect(mixed.map(({ pairs }) => pairs)).toEqual(sorted.map(({ pairs }) => pairs));
    mixed.forEach(({ estimate }, k) => expect(estimate).toBeCloseTo(sorted[k].estimate ?? Number.NaN, 12));
  });

  it("finds the correlation of a first-order series again, within three standard errors", () => {
    const normal = seededNormal(5);
    const series = new Float64Array(5000);
    for (let k = 1; k < series.length; k++) series[k] = 0.6 * series[k - 1] + normal();
    const found = autocorrelation(series, { lags: 3 });
    // sqrt((1 - 0.36) / n) at lag 1; later lags vary more (Box, Jenkins & Reinsel 2008, section 2.1.6).
    found.forEach(({ lag, estimate }) => expect(Math.abs((estimate ?? 0) - 0.6 ** lag)).toBeLessThan(3 * Math.sqrt(2 / 5000)));
  });

  it("leaves about five in a hundred lags of independent values outside its bounds", () => {
    const normal = seededNormal(6);
    const found = autocorrelation(Float64Array.from({ length: 4000 }, normal), { lags: 300 });
    const outside = found.filter(({ estimate, upper }) => Math.abs(estimate ?? 0) > (upper ?? 0)).length;
    expect(Math.abs(outside / 300 - 0.05)).toBeLessThan(3 * Math.sqrt((0.05 * 0.95) / 300));
  });

  it("is null where there is no pair, or nothing varies", () => {
    expect(autocorrelation([1, 2], { lags: 2 })[1]).toEqual({ lag: 2, pairs: 0, estimate: null, lower: null, upper: null });
    expect(autocorrelation([4, 4, 4], { lags: 1 })[0].estimate).toBe(null);
    expect(autocorrelation([], { lags: 1 })[0].pairs).toBe(0);
  });

  it("stays from -1 to 1, and is not changed by shift or scale", () => {
    const normal = seededNormal(7);
    for (let turn = 0; turn < 50; turn++) {
      const few = Array.from({ length: 6 }, normal);
      const found = autocorrelation(few, { lags: 4 });
      const scaled = autocorrelation(few.map((value) => 5 - 3 * value), { lags: 4 });
      found.forEach(({ estimate }, k) => {
        expect(Math.abs(estimate ?? 2)).toBeLessThanOrEqual(1);
        expect(scaled[k].estimate).toBeCloseTo(estimate ?? Number.NaN, 9);
      });
    }
  });

  const refused: [string, readonly number[], AutocorrelationOptions, string][] = [
    ["no lags", values, { lags: 0 }, "lags is 0; it must be a whole number of at least 1."],
    ["half a lag", values, { lags: 1.5 }, "lags is 1.5; it must be a whole number of at least 1."],
    ["a residual that is no number", [1, Number.NaN], { lags: 1 }, 'Column "residuals" (autocorrelation) must be finite; row 2 is NaN.'],
    ["too few series", [1, 2, 3], { lags: 1, series: ["a"] }, "series has 1 rows, residuals has 3; both must have the same length."],
    ["too many times", [1, 2], { lags: 1, time: [1, 2, 3] }, "time has 3 rows, residuals has 2; both must have the same length."],
    ["a time that is not whole", [1, 2], { lags: 1, time: [1, 2.5] }, "time must be whole numbers; row 2 is 2.5."],
    ["time that stands still", [1, 2], { lags: 1, time: [3, 3] }, "time must rise; row 2 is 3, after 3."],
    ["time that falls within a series", [1, 2, 3], { lags: 1, time: [3, 9, 2], series: ["a", "b", "a"] }, 'time must rise within series "a"; row 3 is 2, after 3.'],
  ];

  it.each(refused)("refuses %s", (_what, residuals, options, message) => {
    expect(() => autocorrelation(residuals, options)).toThrow(expect.objectContaining({ name: "EngineError", message }) as Error);
  });
});
