import { describe, expect, it } from "vitest";
import { bandModel, modelReport, serialiseModel, termCurve } from "@shared/engine";
import { elasticityAt, laneCurve, predictScenario, readFit, shownModel } from "@shared/planning";
import { inventedModel, planCells } from "./an-invented-store";

const fitted = inventedModel({ store: "S1", seed: 41 });
const shown = shownModel(fitted);
const stores = (model: typeof fitted) => [{ store: "S1", model, baseUnits: 400 }];
const level = 0.8;

describe("The model that intervals are shown with", () => {
  it("has the band averaged over penalties; estimates, degrees of freedom and tests stay", () => {
    expect(shown.band).toBe("averaged");
    expect(shown.covariance).toEqual(bandModel(fitted, "averaged").covariance);
    expect(shown.coefficients).toBe(fitted.coefficients);
    expect(modelReport(shown)).toEqual(modelReport(fitted));
    expect(shownModel(shown)).toBe(shown);
  });

  it("is read from a fit's text, whether it was kept with that band or before there was one", () => {
    expect(readFit(serialiseModel(shown))).toEqual(shown);
    expect(readFit(serialiseModel(fitted).replace('"band":"pointwise",', ""))).toEqual(shown);
  });

  it("gives lanes and elasticities the engine's averaged band", () => {
    const own = termCurve(fitted, "price", { points: 41, level, band: "averaged" });
    const lane = laneCurve({ stores: stores(shown), driver: "price", level, points: 41 });
    own.lower.forEach((value, index) => expect(lane?.lower[index]).toBeCloseTo(value, 10));
    const { derivative } = termCurve(fitted, "price", { at: [1.6], level, band: "averaged", derivative: true });
    expect(elasticityAt({ stores: stores(shown), price: 1.6, level })?.lower).toBeCloseTo(derivative?.lower[0] ?? NaN, 10);
  });

  it("widens the intervals of lift, units and every driver, and moves no estimate", () => {
    const cells = planCells({ stores: ["S1"], weeks: 8 }, () => ({ price: 1.51, promotion: "feature", temperatureC: 20 }));
    const [before, after] = [fitted, shown].map((model) => predictScenario({ stores: stores(model), cells, level }));
    expect(after.units.estimate).toBe(before.units.estimate);
    expect(after.lift.estimate).toBe(before.lift.estimate);
    const width = ({ lower, upper }: { lower: number; upper: number }) => upper - lower;
    expect(width(after.lift)).toBeGreaterThan(1.05 * width(before.lift));
    expect(width(after.units)).toBeGreaterThan(width(before.units));
    expect(width(after.weather.multiplier)).toBeGreaterThan(width(before.weather.multiplier));
    after.split.forEach(({ multiplier }, index) => expect(width(multiplier)).toBeGreaterThan(width(before.split[index].multiplier)));
    after.weeks.forEach(({ units }, index) => expect(width(units)).toBeGreaterThan(width(before.weeks[index].units)));
  });
});
