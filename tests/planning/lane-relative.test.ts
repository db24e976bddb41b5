import { describe, expect, it } from "vitest";
import { curveDifference, designTransposeTimes, covarianceQuadratic, bandModel, normalQuantile } from "@shared/engine";
import { laneCurve, shownModel, varianceOfSum } from "@shared/planning";
import { inventedModel } from "./an-invented-store";

const level = 0.8;
const at = [1.4, 1.6, 1.89, 2];
const stores = [61, 62].map((seed, index) => ({
  store: `S${index + 1}`, model: shownModel(inventedModel({ store: `S${index + 1}`, seed, level: 3 + index })), baseUnits: 100 + 200 * index,
}));
const laneOf = (of: typeof stores, relativeTo?: number) => {
  const lane = laneCurve({ stores: of, driver: "price", level, at, relativeTo });
  if (lane === null) throw new Error("The lane should have a curve.");
  return lane;
};

describe("A lane relative to a value", () => {
  it("of one store is the engine's difference, and one without doubt at the value", () => {
    const lane = laneOf(stores.slice(0, 1), 1.89);
    const own = curveDifference(stores[0].model, "price", { at, from: 1.89, level });
    at.forEach((_value, index) => {
      expect(lane.estimate[index]).toBeCloseTo(own.estimate[index], 10);
      expect(lane.lower[index]).toBeCloseTo(own.lower[index], 10);
      expect(lane.upper[index]).toBeCloseTo(own.upper[index], 10);
    });
    expect([lane.estimate[2], lane.standardError[2]]).toEqual([0, 0]);
  });

  it("of several is their units' ratio, with the delta method's error of its logarithm", () => {
    const lane = laneOf(stores, 1.89);
    const centred = laneOf(stores);
    const known = { promotion: ["none"], yearFraction: [0.5], temperatureC: [15], mechanic: ["none"], event: ["none"], logExposure: [0] };
    at.forEach((value, index) => {
      expect(lane.estimate[index]).toBeCloseTo(centred.estimate[index] - centred.estimate[2], 12);
      const rows = stores.map(({ model, baseUnits }) => {
        const [row, reference] = [value, 1.89].map((price) => designTransposeTimes(model, { ...known, price: [price] }, Float64Array.of(1)));
        const term = model.terms.find(({ id }) => id === "price");
        const effect = (of: Float64Array) => of.reduce((sum, entry, k) => (term && k >= term.first && k < term.first + term.count ? sum + entry * model.coefficients[k] : sum), 0);
        return { model, row, reference, own: baseUnits * Math.exp(effect(row)), base: baseUnits * Math.exp(effect(reference)), inTerm: (k: number) => Number(term !== undefined && k >= term.first && k < term.first + term.count) };
      });
      const [units, base] = [rows.reduce((sum, { own }) => sum + own, 0), rows.reduce((sum, store) => sum + store.base, 0)];
      const variance = varianceOfSum(rows.map(({ model, row, reference, own, base: ownBase, inTerm }) => {
        const gradient = row.map((entry, k) => inTerm(k) * ((own / units) * entry - (ownBase / base) * reference[k]));
        return { all: covarianceQuadratic(model, gradient, gradient), known: covarianceQuadratic(bandModel(model, "pointwise"), gradient, gradient) };
      }));
      expect(lane.upper[index] - lane.estimate[index]).toBeCloseTo(normalQuantile(level) * Math.sqrt(Math.max(0, variance)), 7);
    });
  });

  it("opens away from the value, where the centred curve's band does not tell what the difference is", () => {
    const { standardError } = laneOf(stores, 1.89);
    expect(standardError[2]).toBeLessThan(1e-6);
    expect(standardError[1]).toBeGreaterThan(0);
    expect(standardError[0]).toBeGreaterThan(standardError[1]);
  });
});
