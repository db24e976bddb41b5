import { describe, expect, it } from "vitest";
import { bias, coverage, meanAbsoluteScaledError, weightedAbsolutePercentageError } from "@shared/planning";

describe("measures of accuracy", () => {
  it("weigh absolute errors by what was sold", () => {
    expect(weightedAbsolutePercentageError({ actual: [10, 30], predicted: [14, 30] })).toBeCloseTo(0.1, 15);
    expect(weightedAbsolutePercentageError({ actual: [10, 30], predicted: [10, 30] })).toBe(0);
    expect(weightedAbsolutePercentageError({ actual: [0, 0], predicted: [1, 1] })).toBeNull();
  });

  it("call predicting too much a positive bias, where errors of both signs cancel", () => {
    expect(bias({ actual: [10, 30], predicted: [14, 30] })).toBeCloseTo(0.1, 15);
    expect(bias({ actual: [10, 30], predicted: [20, 20] })).toBe(0);
    expect(bias({ actual: [], predicted: [] })).toBeNull();
  });

  it("scale errors by those of the naive rule within the weeks learnt from", () => {
    // Naive steps of 8, 10, 7, 12: 2, 3, 5, mean 10/3; errors 1 and 4, mean 2.5.
    const learntFrom = [8, 10, 7, 12];
    expect(meanAbsoluteScaledError({ actual: [12, 9], predicted: [11, 13], learntFrom, season: 1 })).toBeCloseTo(0.75, 14);
    // Two steps back: |7 - 8| and |12 - 10|, mean 1.5.
    expect(meanAbsoluteScaledError({ actual: [12, 9], predicted: [11, 13], learntFrom, season: 2 })).toBeCloseTo(2.5 / 1.5, 14);
  });

  it("do not change with the unit that is counted in", () => {
    const one = meanAbsoluteScaledError({ actual: [12, 9], predicted: [11, 13], learntFrom: [8, 10, 7], season: 1 });
    const learntFrom = [8 / 12, 10 / 12, 7 / 12];
    const dozen = meanAbsoluteScaledError({ actual: [1, 0.75], predicted: [11 / 12, 13 / 12], learntFrom, season: 1 });
    expect(one).not.toBeNull();
    expect(dozen).toBeCloseTo(one ?? 0, 12);
  });

  it("have no scaled error where the naive rule was never wrong or has no season to look back to", () => {
    expect(meanAbsoluteScaledError({ actual: [1], predicted: [1], learntFrom: [5, 5, 5], season: 1 })).toBeNull();
    expect(meanAbsoluteScaledError({ actual: [1], predicted: [1], learntFrom: [5, 6], season: 52 })).toBeNull();
  });

  it("count the actual values within their intervals, ends included", () => {
    expect(coverage({ actual: [4, 9, 6, 5], lower: [4, 4, 4, 4], upper: [6, 8, 6, 6] })).toBe(0.75);
    expect(coverage({ actual: [], lower: [], upper: [] })).toBeNull();
  });

  it("refuse lists of unequal length", () => {
    const message = "Values to compare must be equally many: 2 against 1.";
    expect(() => bias({ actual: [1, 2], predicted: [1] })).toThrow(message);
    expect(() => coverage({ actual: [1, 2], lower: [1, 1], upper: [1] })).toThrow(message);
    expect(() => meanAbsoluteScaledError({ actual: [], predicted: [], learntFrom: [1, 2], season: 1 })).toThrow(
      "An error needs at least one week that was predicted.",
    );
  });
});
