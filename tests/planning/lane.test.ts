import { describe, expect, it } from "vitest";
import { fitModel, termCurve } from "@shared/engine";
import { elasticityAt, laneCurve, toModelData } from "@shared/planning";
import type { LaneStore } from "@shared/planning";
import { inventedModel, inventedWeeks, truth } from "./an-invented-store";

const level = 0.8;
const first = inventedModel({ store: "S1", seed: 31 });
const second = inventedModel({ store: "S2", seed: 32 });
const alone: LaneStore[] = [{ store: "S1", model: first, baseUnits: 400 }];

/** A store that never had a display. */
const rowsWithoutDisplay = inventedWeeks({ store: "S3", seed: 33 }).map((row) => ({ ...row, display: false }));
const withoutDisplay = fitModel(first.spec, toModelData(rowsWithoutDisplay).data);

const laneOf = (request: Parameters<typeof laneCurve>[0]) => {
  const lane = laneCurve(request);
  if (lane === null) throw new Error("The lane should have a curve.");
  return lane;
};

describe("a lane's curve", () => {
  it("of one store is the engine's own", () => {
    const lane = laneOf({ stores: alone, driver: "price", level, points: 41 });
    const own = termCurve(first, "price", { points: 41, level });
    expect(lane.x).toEqual(own.x);
    for (const [index, estimate] of own.estimate.entries()) {
      expect(lane.estimate[index]).toBeCloseTo(estimate, 12);
      expect(lane.lower[index]).toBeCloseTo(own.lower[index], 12);
      expect(lane.upper[index]).toBeCloseTo(own.upper[index], 12);
    }
    expect(lane.supportCount).toEqual(own.supportCount);
    expect(lane.observedRange).toEqual(own.observedRange);
    expect(lane.without).toEqual([]);
  });

  it("of two stores alike is the same curve, known better by the root of two", () => {
    const twins = [...alone, { store: "S9", model: first, baseUnits: 400 }];
    const one = laneOf({ stores: alone, driver: "temperature", level });
    const both = laneOf({ stores: twins, driver: "temperature", level });
    for (const point of [0, 30, 100]) {
      expect(both.estimate[point]).toBeCloseTo(one.estimate[point], 12);
      expect(both.standardError[point]).toBeCloseTo(one.standardError[point] / Math.SQRT2, 12);
    }
  });

  it("is the mean of the stores' multipliers, weighted by base units", () => {
    const stores = [{ store: "S1", model: first, baseUnits: 300 }, { store: "S2", model: second, baseUnits: 100 }];
    const at = [1.5, 1.7, 1.89];
    const lane = laneOf({ stores, driver: "price", level, at });
    const [one, other] = [first, second].map((model) => termCurve(model, "price", { at }).estimate);
    at.forEach((_, point) => {
      expect(Math.exp(lane.estimate[point])).toBeCloseTo(0.75 * Math.exp(one[point]) + 0.25 * Math.exp(other[point]), 12);
    });
  });

  it("spans what any of its stores saw, evenly on the scale of the term", () => {
    const stores = [...alone, { store: "S2", model: second, baseUnits: 100 }];
    const { x, observedRange } = laneOf({ stores, driver: "price", level, points: 11 });
    const ranges = [first, second].map((model) => model.terms[0].observedRange ?? [0, 0]);
    expect(observedRange).toEqual([Math.min(ranges[0][0], ranges[1][0]), Math.max(ranges[0][1], ranges[1][1])]);
    const steps = Array.from({ length: 10 }, (_, point) => Math.log(Number(x[point + 1]) / Number(x[point])));
    for (const step of steps) expect(step).toBeCloseTo(steps[0], 12);
  });

  it("hatches what stores with at least half of the base units hardly saw", () => {
    const [low] = first.terms[0].observedRange ?? [0];
    const at = [low * 0.8, 1.89];
    expect([...laneOf({ stores: alone, driver: "price", level, at }).hardlySeen]).toEqual([1, 0]);
  });

  it("of a factor has the levels of all its stores, each averaged over those that saw it", () => {
    const stores = [{ store: "S1", model: first, baseUnits: 100 }, { store: "S3", model: withoutDisplay, baseUnits: 100 }];
    const { x, estimate, supportCount, hardlySeen } = laneOf({ stores, driver: "promotion", level });
    expect(x).toEqual(["none", "both", "display", "feature"]);
    expect(estimate[0]).toBe(0);
    const own = termCurve(first, "promotion", { at: ["display"] });
    expect(estimate[2]).toBeCloseTo(own.estimate[0], 12);
    expect(supportCount[2]).toBeCloseTo(own.supportCount[0] / 2, 12);
    expect([...hardlySeen]).toEqual([0, 1, 1, 0]);
  });

  it("leaves out stores whose model lacks the driver, and is none when all do", () => {
    const { data } = toModelData(inventedWeeks({ store: "S4", seed: 34 }));
    const priceOnly = fitModel({ ...first.spec, terms: first.spec.terms.slice(0, 1) }, data);
    const stores = [...alone, { store: "S4", model: priceOnly, baseUnits: 900 }];
    const lane = laneOf({ stores, driver: "temperature", level, points: 21 });
    expect(lane.without).toEqual(["S4"]);
    expect(lane.estimate).toEqual(laneOf({ stores: alone, driver: "temperature", level, points: 21 }).estimate);
    expect(laneCurve({ stores: [stores[1]], driver: "temperature", level })).toBeNull();
  });

  it("of the time of year closes its circle", () => {
    const { x, estimate } = laneOf({ stores: [...alone, { store: "S2", model: second, baseUnits: 100 }], driver: "season", level });
    expect([x[0], x[100]]).toEqual([0, 1]);
    expect(estimate[0]).toBeCloseTo(estimate[100], 10);
  });
});

describe("elasticity at a price", () => {
  it("is the true one within its interval", () => {
    const { lower, upper } = elasticityAt({ stores: alone, price: 1.6, level: 0.99 }) ?? { lower: 0, upper: 0 };
    expect(lower).toBeLessThan(truth.elasticity);
    expect(upper).toBeGreaterThan(truth.elasticity);
  });

  it("of a straight line in log price is its coefficient, at any price", () => {
    const line = fitModel(
      { response: "units", family: "quasi-poisson", terms: [{ kind: "linear", column: "price", log: true }] },
      toModelData(inventedWeeks({ store: "S1", seed: 31 })).data,
    );
    for (const price of [1.4, 1.9]) {
      const elasticity = elasticityAt({ stores: [{ store: "S1", model: line, baseUnits: 1 }], price, level });
      expect(elasticity?.estimate).toBeCloseTo(line.coefficients[1], 12);
    }
  });

  it("of several stores is the slope of the curve their lane draws", () => {
    const stores = [...alone, { store: "S2", model: second, baseUnits: 150 }];
    const step = 1e-4;
    const { estimate } = laneOf({ stores, driver: "price", level, at: [1.6 * Math.exp(-step), 1.6 * Math.exp(step)] });
    expect(elasticityAt({ stores, price: 1.6, level })?.estimate).toBeCloseTo((estimate[1] - estimate[0]) / (2 * step), 6);
  });

  it("is none where price never varied", () => {
    const spec = { ...first.spec, terms: first.spec.terms.slice(1, 2) };
    const fitted = fitModel(spec, toModelData(inventedWeeks({ store: "S5", seed: 35 })).data);
    expect(elasticityAt({ stores: [{ store: "S5", model: fitted, baseUnits: 10 }], price: 1.6, level })).toBeNull();
  });
});
