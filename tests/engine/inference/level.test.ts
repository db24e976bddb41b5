import { EngineError, normalQuantile } from "@shared/engine";
import { describe, expect, it } from "vitest";

describe("Half the width of an interval in standard errors", () => {
  // R 4.2.2: qnorm((1 + level) / 2); fifteen digits.
  it.each([
    { level: 0.5, quantile: 0.674489750196082 }, { level: 0.8, quantile: 1.2815515655446 }, { level: 0.9, quantile: 1.64485362695147 },
    { level: 0.95, quantile: 1.95996398454005 }, { level: 0.99, quantile: 2.5758293035489 }, { level: 0.999999, quantile: 4.8916384756998 },
  ])("at level $level is $quantile", ({ level, quantile }) => {
    expect(Math.abs(normalQuantile(level) / quantile - 1)).toBeLessThan(1e-10);
  });

  it.each([0, 1, -0.2, 1.5, Number.NaN])("has no level %s", (level) => {
    expect(() => normalQuantile(level)).toThrow(EngineError);
    expect(() => normalQuantile(level)).toThrow(`level is ${level}; it must be above 0 and below 1.`);
  });
});
