import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { predict } from "@shared/engine";
import type { FittedModel } from "@shared/engine";
import { modelColumns, predictScenario } from "@shared/planning";
import type { PlanCell, ScenarioPrediction, StoreModel } from "@shared/planning";
import { cellInState } from "@shared/planning/scenario/plan-cells";
import { aPlanCell, inventedModel, planCells, truth } from "./an-invented-store";

const stores: StoreModel[] = [
  { store: "S1", model: inventedModel({ store: "S1", seed: 11 }) },
  { store: "S2", model: inventedModel({ store: "S2", seed: 12, level: 3 }) },
  { store: "S3", model: inventedModel({ store: "S3", seed: 13, level: 4.5 }) },
];
const codes = stores.map(({ store }) => store);
const level = 0.8;
/** Half the width of an 80 % interval in standard deviations (R: qnorm(0.9)). */
const z = 1.2815515655446004;

const sumOf = (values: Iterable<number>) => [...values].reduce((sum, value) => sum + value, 0);
const unitsBy = ({ split }: ScenarioPrediction) => Object.fromEntries(split.map((row) => [row.driver, row.units]));

const summerPlan = planCells({ stores: codes, weeks: 6 }, (_, index) => ({
  price: index % 2 === 0 ? 1.49 : 1.59, promotion: index % 3 === 0 ? "feature" : "none", temperatureC: 24 - (index % 4),
}));
const anyPlan = fc
  .array(
    fc.record({
      price: fc.double({ min: 1.2, max: 2.4, noNaN: true }),
      promotion: fc.constantFrom("none", "feature", "display", "both"),
      temperatureC: fc.double({ min: -5, max: 30, noNaN: true }),
      regularPrice: fc.double({ min: 1.5, max: 2.1, noNaN: true }),
    }),
    { minLength: 9, maxLength: 9 },
  )
  .map((changes) => planCells({ stores: codes, weeks: 3 }, (_, index) => changes[index]));

describe("units of a scenario", () => {
  it("are the engine's expected values, summed over stores and weeks", () => {
    const prediction = predictScenario({ stores, cells: summerPlan, level });
    const engineTotal = (state: "plan" | "base" | "normal") =>
      sumOf(stores.map(({ store, model }) => {
        const cells = summerPlan.filter((cell) => cell.store === store).map((cell) => cellInState(cell, state));
        return sumOf(predict(model, modelColumns(cells)).mean);
      }));
    expect(prediction.units.estimate).toBeCloseTo(engineTotal("plan"), 9);
    expect(prediction.baseUnits).toBeCloseTo(engineTotal("base"), 9);
    expect(prediction.baseInNormalWeather).toBeCloseTo(engineTotal("normal"), 9);
  });

  it("answer a price cut, a feature and a hot week as the invented stores were made to", () => {
    const cells = planCells({ stores: codes, weeks: 4 }, () => ({ price: 1.59, promotion: "feature", temperatureC: 20 }));
    const { split, weather } = predictScenario({ stores, cells, level: 0.99 });
    const holds = (row: { multiplier: { lower: number; upper: number } }, multiplier: number) => {
      expect(row.multiplier.lower).toBeLessThan(multiplier);
      expect(row.multiplier.upper).toBeGreaterThan(multiplier);
    };
    holds(split[0], (1.59 / 1.89) ** truth.elasticity);
    holds(split[1], Math.exp(truth.promotion.feature));
    holds(weather, Math.exp(4 * truth.perDegree));
  });
});

describe("the split among drivers", () => {
  it("adds up to the plan exactly, and its multipliers multiply to 1 + lift, for any plan", () => {
    fc.assert(
      fc.property(anyPlan, (cells) => {
        const prediction = predictScenario({ stores, cells, level });
        const added = sumOf(prediction.split.map((row) => row.units));
        expect(Math.abs(prediction.baseUnits + added - prediction.units.estimate)).toBeLessThan(1e-9);
        expect(Math.abs(prediction.baseInNormalWeather + prediction.weather.units - prediction.baseUnits)).toBeLessThan(1e-9);
        const product = prediction.split.reduce((factor, row) => factor * row.multiplier.estimate, 1);
        expect(product / (1 + prediction.lift.estimate)).toBeCloseTo(1, 11);
      }),
      { seed: 2_005, numRuns: 60 },
    );
  });

  it("does not depend on the order of cells and stores", () => {
    const forward = unitsBy(predictScenario({ stores, cells: summerPlan, level }));
    const backward = unitsBy(predictScenario({ stores: [...stores].reverse(), cells: [...summerPlan].reverse(), level }));
    for (const [driver, units] of Object.entries(forward)) expect(backward[driver]).toBeCloseTo(units, 9);
  });

  it("of plan and base exchanged is the same with opposite sign", () => {
    const plan = planCells({ stores: ["S1"], weeks: 3 }, () => ({ price: 1.49 }));
    const exchanged = planCells({ stores: ["S1"], weeks: 3 }, () => ({ regularPrice: 1.49 }));
    const [there] = predictScenario({ stores: [stores[0]], cells: plan, level }).split;
    const [back] = predictScenario({ stores: [stores[0]], cells: exchanged, level }).split;
    expect(there.units).toBeGreaterThan(0);
    expect(back.units).toBeCloseTo(-there.units, 9);
    expect(back.multiplier.estimate).toBeCloseTo(1 / there.multiplier.estimate, 12);
    expect(back.multiplier.lower).toBeCloseTo(1 / there.multiplier.upper, 10);
  });

  it("gives a driver that did not move nothing, with certainty", () => {
    const cells = planCells({ stores: codes, weeks: 2 }, () => ({ promotion: "display" }));
    const [price, promotion] = predictScenario({ stores, cells, level }).split;
    expect(price).toEqual({ driver: "price", units: 0, multiplier: { estimate: 1, lower: 1, upper: 1 } });
    expect(promotion.units).toBeGreaterThan(0);
  });

  it("gives the only driver that moved the whole lift, with the lift's interval", () => {
    const cells = planCells({ stores: codes, weeks: 4 }, () => ({ price: 1.49 }));
    const { split, lift } = predictScenario({ stores, cells, level });
    expect(split[0].multiplier.estimate).toBeCloseTo(1 + lift.estimate, 11);
    expect(split[0].multiplier.lower).toBeCloseTo(1 + lift.lower, 9);
    expect(split[0].multiplier.upper).toBeCloseTo(1 + lift.upper, 9);
  });

  it("of one store-week has multipliers that are exp of the difference of contributions", () => {
    const cell = aPlanCell({ price: 1.59, promotion: "feature" });
    const { model } = stores[0];
    const contributions = (state: "plan" | "base") => predict(model, modelColumns([cellInState(cell, state)])).contributions;
    const { split } = predictScenario({ stores: [stores[0]], cells: [cell], level });
    for (const [row, term] of [[split[0], "price"], [split[1], "promotion"]] as const) {
      const expected = Math.exp(contributions("plan")[term][0] - contributions("base")[term][0]);
      expect(row.multiplier.estimate).toBeCloseTo(expected, 12);
    }
  });
});

describe("lift", () => {
  it("is zero with no width at all when the plan is the base", () => {
    const { lift, split, units, baseUnits } = predictScenario({ stores, cells: planCells({ stores: codes, weeks: 12 }), level });
    expect(lift).toEqual({ estimate: 0, lower: 0, upper: 0 });
    expect(split.map((row) => row.multiplier)).toEqual([{ estimate: 1, lower: 1, upper: 1 }, { estimate: 1, lower: 1, upper: 1 }]);
    expect(units.estimate).toBe(baseUnits);
    expect(units.upper).toBeGreaterThan(units.lower);
  });

  it("is none for a hot week: weather raises the base, and helps no break-even", () => {
    const hot = predictScenario({ stores, cells: planCells({ stores: codes, weeks: 3 }, () => ({ temperatureC: 28 })), level });
    expect(hot.lift).toEqual({ estimate: 0, lower: 0, upper: 0 });
    expect(hot.weather.units).toBeGreaterThan(100);
    expect(hot.weather.multiplier.lower).toBeGreaterThan(1);
    expect(hot.money.netGain).toBe(0);
    expect(hot.money.breakEven).toEqual({ kind: "none needed" });
  });

  it("does not depend on exposure, which plan and base share", () => {
    const change = { price: 1.49, promotion: "both" } as const;
    const full = predictScenario({ stores: [stores[0]], cells: [aPlanCell(change)], level });
    const half = predictScenario({ stores: [stores[0]], cells: [aPlanCell({ ...change, exposure: 0.5 })], level });
    expect(half.units.estimate).toBeCloseTo(full.units.estimate / 2, 9);
    expect(half.lift.estimate).toBeCloseTo(full.lift.estimate, 12);
    expect(half.lift.upper).toBeCloseTo(full.lift.upper, 12);
  });

  it("of two stores alike is known better than that of one, by the root of two", () => {
    const { model } = stores[0];
    const twins = [{ store: "A", model }, { store: "B", model }];
    const plan = (names: string[]) => planCells({ stores: names, weeks: 4 }, () => ({ price: 1.49 }));
    const width = ({ lift }: ScenarioPrediction) => Math.log(1 + lift.upper) - Math.log(1 + lift.lower);
    const one = predictScenario({ stores: [twins[0]], cells: plan(["A"]), level });
    const both = predictScenario({ stores: twins, cells: plan(["A", "B"]), level });
    expect(both.lift.estimate).toBeCloseTo(one.lift.estimate, 12);
    expect(width(one) / width(both)).toBeCloseTo(Math.SQRT2, 9);
  });
});

describe("intervals", () => {
  /** Standard deviation of a figure's logarithm by the delta method with differences in place of derivatives. */
  const deviationByDifferences = (figure: (prediction: ScenarioPrediction) => number, cells: readonly PlanCell[]) => {
    const variances = stores.map(({ store, model }) => {
      const gradient = model.coefficients.map((_, coefficient) => {
        const step = 1e-5;
        const at = (move: number) => {
          const coefficients = model.coefficients.slice();
          coefficients[coefficient] += move;
          const moved = stores.map((entry) => (entry.store === store ? { store, model: { ...model, coefficients } } : entry));
          return Math.log(figure(predictScenario({ stores: moved, cells, level })));
        };
        return (at(step) - at(-step)) / (2 * step);
      });
      return quadratic(model, gradient);
    });
    return Math.sqrt(sumOf(variances));
  };

  const quadratic = ({ covariance }: FittedModel, gradient: Float64Array) => {
    let total = 0;
    for (let row = 0; row < gradient.length; row++) {
      for (let column = 0; column < gradient.length; column++) {
        const [high, low] = [Math.max(row, column), Math.min(row, column)];
        total += gradient[row] * gradient[column] * covariance[(high * (high + 1)) / 2 + low];
      }
    }
    return total;
  };

  const prediction = predictScenario({ stores, cells: summerPlan, level });

  it.each([
    ["lift", (made: ScenarioPrediction) => made.lift, 1],
    ["the price multiplier", (made: ScenarioPrediction) => made.split[0].multiplier, 0],
    ["the promotion multiplier", (made: ScenarioPrediction) => made.split[1].multiplier, 0],
    ["the weather multiplier", (made: ScenarioPrediction) => made.weather.multiplier, 0],
  ] as const)("of %s have the width that small changes of the coefficients give", (_, intervalIn, plus) => {
    const { estimate, lower, upper } = intervalIn(prediction);
    const deviation = deviationByDifferences((made) => intervalIn(made).estimate + plus, summerPlan);
    // Differences with step 1e-5 agree with derivatives to about 1e-8.
    expect(Math.log((upper + plus) / (estimate + plus)) / (z * deviation)).toBeCloseTo(1, 6);
    expect(Math.log((estimate + plus) / (lower + plus)) / (z * deviation)).toBeCloseTo(1, 6);
  });

  it("of units are those of a lognormal with the total's mean and the variance of coefficients and noise", () => {
    const { estimate, lower, upper } = prediction.units;
    const fromCoefficients = (estimate * deviationByDifferences((made) => made.units.estimate, summerPlan)) ** 2;
    const fromNoise = sumOf(stores.map(({ store, model }) =>
      Math.max(1, model.dispersion) * (prediction.stores.find((entry) => entry.store === store)?.units ?? 0)));
    const logDeviation = Math.log(upper / lower) / (2 * z);
    const median = Math.sqrt(lower * upper);
    expect(median * Math.exp(logDeviation ** 2 / 2)).toBeCloseTo(estimate, 6);
    const variance = estimate ** 2 * Math.expm1(logDeviation ** 2);
    expect(variance / (fromCoefficients + fromNoise)).toBeCloseTo(1, 6);
  });

  it("are wider at a higher level, around the same estimate", () => {
    const wide = predictScenario({ stores, cells: summerPlan, level: 0.95 });
    expect(wide.units.estimate).toBe(prediction.units.estimate);
    expect(wide.units.lower).toBeLessThan(prediction.units.lower);
    expect(wide.lift.upper).toBeGreaterThan(prediction.lift.upper);
  });
});
