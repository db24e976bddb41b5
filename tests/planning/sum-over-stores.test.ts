import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { bandModel, covarianceQuadratic, termCurve } from "@shared/engine";
import { curveWithKnown, elasticityAt, laneCurve, predictScenario, shownModel, varianceOfSum } from "@shared/planning";
import { storeEvaluator } from "@shared/planning/scenario/store-evaluation";
import { withKnownPenalties } from "@shared/planning/sum-over-stores";
import { inventedModel, planCells } from "./an-invented-store";

const level = 0.8;
/** Half the width of an 80 % interval in standard deviations (R: qnorm(0.9)). */
const z = 1.2815515655446004;
const fitted = [51, 52, 53].map((seed, index) => ({ store: `S${index + 1}`, model: inventedModel({ store: `S${index + 1}`, seed }) }));
const shown = fitted.map(({ store, model }) => ({ store, model: shownModel(model), baseUnits: 300 }));
const cells = planCells({ stores: ["S1", "S2", "S3"], weeks: 5 }, () => ({ price: 1.51, promotion: "feature" }));

describe("The variance of a sum over stores", () => {
  const part = fc.record({ all: fc.double({ min: 0, max: 1e6, noNaN: true }), known: fc.double({ min: 0, max: 1e6, noNaN: true }) });

  it("is the store's own where there is one, whichever of the two is larger", () => {
    fc.assert(fc.property(part, ({ all, known }) => {
      expect(Math.abs(varianceOfSum([{ all, known }]) - all)).toBeLessThanOrEqual(1e-9 * (1 + all));
    }));
  });

  it("lies between that of independent stores and that of stores that err alike", () => {
    fc.assert(fc.property(fc.array(part, { maxLength: 30 }), (parts) => {
      const sum = varianceOfSum(parts);
      const independent = parts.reduce((total, { all }) => total + all, 0);
      const alike = parts.reduce((total, { all }) => total + Math.sqrt(all), 0) ** 2;
      expect(sum).toBeGreaterThanOrEqual(independent * (1 - 1e-9));
      expect(sum).toBeLessThanOrEqual(alike * (1 + 1e-9));
    }));
  });

  it("adds by squares what penalties do not add to, and as it is what they do; the example's 18", () => {
    expect(varianceOfSum([{ all: 3, known: 3 }, { all: 4, known: 4 }])).toBe(7);
    expect(varianceOfSum([{ all: 5, known: 1 }, { all: 5, known: 1 }])).toBe(18);
    expect(varianceOfSum([])).toBe(0);
  });
});

describe("A store's model with penalties taken as known", () => {
  it("is made once, has the band it was fitted with, and is the model itself where it has no other", () => {
    const known = withKnownPenalties(shown[0].model);
    expect(withKnownPenalties(shown[0].model)).toBe(known);
    expect(known.band).toBe("pointwise");
    expect(withKnownPenalties(fitted[0].model)).toBe(fitted[0].model);
    const own = termCurve(fitted[0].model, "price", { points: 9, level });
    const { curve, known: narrow } = curveWithKnown(shown[0].model, "price", { points: 9, level });
    own.standardError.forEach((value, index) => expect(Math.abs(narrow.standardError[index] / value - 1)).toBeLessThan(1e-6));
    expect(curve).toEqual(termCurve(bandModel(fitted[0].model, "averaged"), "price", { points: 9, level }));
  });
});

describe("Intervals over several stores", () => {
  const { lift, weeks } = predictScenario({ stores: shown, cells, level });

  it("of lift add what smoothing may hide in all stores as it is, by hand", () => {
    const states = shown.map(({ store, model }) => storeEvaluator({ store, model })(cells.filter((cell) => cell.store === store)));
    const totalOf = (of: "plan" | "base") => states.reduce((sum, state) => sum + state[of].total, 0);
    let [own, common] = [0, 0];
    states.forEach(({ model, plan, base }, index) => {
      const gradient = plan.totalGradient.map((value, at) => value / totalOf("plan") - base.totalGradient[at] / totalOf("base"));
      const known = covarianceQuadratic(fitted[index].model, gradient, gradient);
      own += known;
      common += Math.sqrt(covarianceQuadratic(model, gradient, gradient) - known);
    });
    const half = Math.log((1 + lift.upper) / (1 + lift.estimate));
    expect(half).toBeCloseTo(z * Math.sqrt(own + common ** 2), 8);
    // Not as if stores were independent, and not the same as before penalties were allowed for.
    expect(half).toBeGreaterThan(1.1 * z * Math.sqrt(own));
  });

  it("of one of three stores alike is as wide as of all where smoothing alone is in doubt, and narrower by the root of three where it is not", () => {
    const alike = (model: (typeof shown)[0]["model"]) => ["S1", "S2", "S3"].map((store) => ({ store, model, baseUnits: 300 }));
    const widths = (model: (typeof shown)[0]["model"]) => {
      const own = laneCurve({ stores: alike(model).slice(0, 1), driver: "price", level, at: [1.5] });
      const all = laneCurve({ stores: alike(model), driver: "price", level, at: [1.5] });
      return (all?.standardError[0] ?? NaN) / (own?.standardError[0] ?? NaN);
    };
    expect(widths(fitted[0].model)).toBeCloseTo(1 / Math.sqrt(3), 9);
    const [known, all] = [fitted[0], shown[0]].map(({ model }) => termCurve(model, "price", { at: [1.5] }).standardError[0] ** 2);
    expect(widths(shown[0].model)).toBeCloseTo(Math.sqrt((known / 3 + all - known) / all), 6);
  });

  it("of the elasticity are those of the slopes' sum", () => {
    const [known, all] = [fitted, shown].map((stores) =>
      stores.map(({ model }) => {
        const { estimate, derivative } = termCurve(model, "price", { at: [1.5], derivative: true });
        return { units: 300 * Math.exp(estimate[0]), error: derivative?.standardError[0] ?? NaN };
      }));
    const units = all.reduce((sum, store) => sum + store.units, 0);
    const variance = varianceOfSum(all.map((store, index) => ({ all: (store.units * store.error) ** 2, known: (store.units * known[index].error) ** 2 })));
    const { lower, upper } = elasticityAt({ stores: shown, price: 1.5, level }) ?? { lower: NaN, upper: NaN };
    expect((upper - lower) / 2).toBeCloseTo((z * Math.sqrt(variance)) / units, 7);
  });

  it("of a week are those of a plan of that week alone, and wider than with penalties taken as known", () => {
    const [week] = weeks;
    const alone = predictScenario({ stores: shown, cells: cells.filter((cell) => cell.week === week.week), level });
    expect(alone.weeks[0].units.lower).toBeCloseTo(alone.units.lower, 8);
    expect(alone.weeks[0].units.upper).toBeCloseTo(alone.units.upper, 8);
    expect(alone.weeks[0]).toEqual(week);
    const plain = predictScenario({ stores: fitted, cells, level });
    weeks.forEach(({ units }, index) => {
      expect(units.estimate).toBe(plain.weeks[index].units.estimate);
      expect(units.upper - units.lower).toBeGreaterThan(plain.weeks[index].units.upper - plain.weeks[index].units.lower);
    });
  });
});
