import { describe, expect, it } from "vitest";
import { fitModel, termCurve, type FittedModel } from "@shared/engine";
import { defaultSpec, describeVariation, toModelData } from "@shared/planning";
import { products } from "../../demo/chain/products";
import { generateDemo } from "../../demo/generate";
import { trueCurve, trueElasticity, truthOf } from "../../demo/truth/true-curve";
import { storedRows } from "./stored-rows";

const demo = generateDemo();
const store = "S14";

const average = (values: ArrayLike<number>) =>
  Array.from(values).reduce((sum, value) => sum + value, 0) / values.length;

/** The model a person gets who changes nothing, of one product in one store. */
function fitDefault(product: string): { model: FittedModel; prices: Float64Array } {
  const { data } = toModelData(storedRows(demo, { product, store }));
  const { spec } = defaultSpec(describeVariation(data));
  return { model: fitModel(spec, data), prices: data.price as Float64Array };
}

/** How the fitted price curve lies to the true one, both centred over the weeks seen. */
function comparePrices(product: string) {
  const { model, prices } = fitDefault(product);
  const truth = trueCurve({ product, driver: "price", store });
  const centre = average(prices.map(truth));
  const { estimate, lower, upper } = termCurve(model, "price", { at: prices, level: 0.95 });
  const actual = prices.map((price) => truth(price) - centre);
  const inside = actual.map((value, index) => Number(lower[index] <= value && value <= upper[index]));
  const squares = actual.map((value, index) => (estimate[index] - value) ** 2);
  return { model, share: average(inside), error: Math.sqrt(average(squares)) };
}

describe("The default model of a product in one store", () => {
  const found = products.map(({ code }) => ({ code, ...comparePrices(code) }));

  it("is found for all 18 products", () => {
    expect(found.filter(({ model }) => !model.converged)).toEqual([]);
  });

  it("finds each true price curve to within a tenth", () => {
    for (const { code, error } of found) expect(error, code).toBeLessThan(0.1);
  });

  it("holds the true price curve within its 95 % band for most of the weeks", () => {
    // Below 0.95: a single store's model knows nothing of what persists from week to week, and where it settles for a
    // straight line its band closes at the middle. Over seeds and stores the share is 0.85 to 0.91.
    expect(average(found.map(({ share }) => share))).toBeGreaterThan(0.75);
    expect(found.filter(({ share }) => share > 0.5).length).toBeGreaterThanOrEqual(13);
  });

  it("finds elasticities that are right on average, each within what it says of its own uncertainty", () => {
    const errors = found.map(({ code, model }) => {
      const { anchorPrice } = truthOf(code).price;
      const { derivative } = termCurve(model, "price", { at: [anchorPrice], derivative: true });
      if (!derivative) throw new Error("The curve came without its derivative.");
      const miss = derivative.estimate[0] - trueElasticity({ product: code, price: anchorPrice, store });
      return { code, miss, standardErrors: Math.abs(miss) / derivative.standardError[0] };
    });
    expect(Math.abs(average(errors.map(({ miss }) => miss)))).toBeLessThan(0.15);
    expect(errors.filter(({ standardErrors }) => standardErrors > 4)).toEqual([]);
  });
});
