import { describe, expect, it } from "vitest";
import { products } from "../../demo/chain/products";
import { stores } from "../../demo/chain/stores";
import { storeLevel } from "../../demo/truth/store-level";
import { trueCurve, trueElasticity, truthOf } from "../../demo/truth/true-curve";

const everyProductAndStore = products.flatMap((product) =>
  stores.map((store) => ({ product: product.code, store: store.code })),
);

const grid = (low: number, high: number, points: number) =>
  Array.from({ length: points }, (_, index) => low + ((high - low) * index) / (points - 1));

describe("The truth of the demo", () => {
  it("has price curves that fall everywhere from half to twice the price, in every store", () => {
    for (const of of everyProductAndStore) {
      const curve = trueCurve({ ...of, driver: "price" });
      const { anchorPrice } = truthOf(of.product).price;
      const values = grid(0.5 * anchorPrice, 2 * anchorPrice, 200).map(curve);
      const rises = values.filter((value, index) => index > 0 && value >= values[index - 1]);
      expect(rises, `${of.product} in ${of.store}`).toEqual([]);
    }
  });

  it("has elasticities that are the slopes of its price curves", () => {
    for (const of of everyProductAndStore) {
      const curve = trueCurve({ ...of, driver: "price" });
      const { anchorPrice } = truthOf(of.product).price;
      for (const price of [0.7, 0.85, 1, 1.1].map((ratio) => ratio * anchorPrice)) {
        const step = 1e-5;
        const slope = (curve(price * Math.exp(step)) - curve(price * Math.exp(-step))) / (2 * step);
        expect(trueElasticity({ ...of, price })).toBeCloseTo(slope, 6);
      }
    }
  });

  it("has straight and bent price curves, bent both ways", () => {
    const bends = products.map(({ code }) => {
      const { elasticityAbove, elasticityBelow } = truthOf(code).price;
      return Math.sign(elasticityAbove - elasticityBelow);
    });
    expect(new Set(bends)).toEqual(new Set([-1, 0, 1]));
  });

  it("is zero at the anchor price, at 10 degrees, at no promotion and at no event", () => {
    for (const of of everyProductAndStore) {
      expect(trueCurve({ ...of, driver: "price" })(truthOf(of.product).price.anchorPrice)).toBeCloseTo(0, 12);
      expect(trueCurve({ ...of, driver: "temperatureC" })(10)).toBeCloseTo(0, 12);
      expect(trueCurve({ ...of, driver: "promotion" })("none")).toBeCloseTo(0, 12);
      expect(trueCurve({ ...of, driver: "event" })("none")).toBeCloseTo(0, 12);
    }
  });

  it("has season curves that close on the circle and are zero on average over a year", () => {
    for (const of of everyProductAndStore) {
      const curve = trueCurve({ ...of, driver: "yearFraction" });
      expect(curve(1)).toBeCloseTo(curve(0), 12);
      const average = grid(0, 1, 53).slice(1).reduce((sum, fraction) => sum + curve(fraction), 0) / 52;
      expect(average).toBeCloseTo(0, 12);
    }
  });

  it("has visitors on the coast in summer, and nowhere else", () => {
    const lemonade = (store: string) => trueCurve({ product: "P101", driver: "yearFraction", store })(0.58);
    const chain = trueCurve({ product: "P101", driver: "yearFraction" })(0.58);
    for (const { code, region } of stores) {
      if (region === "Coast") expect(lemonade(code)).toBeGreaterThan(chain + 0.05);
      else expect(lemonade(code)).toBeCloseTo(chain, 12);
    }
  });

  it("sells more with feature and display together than with either, in every store", () => {
    for (const of of everyProductAndStore) {
      const effect = trueCurve({ ...of, driver: "promotion" });
      expect(effect("both")).toBeGreaterThan(Math.max(effect("feature"), effect("display")));
      expect(Math.min(effect("feature"), effect("display"))).toBeGreaterThan(0);
    }
  });

  it("answers for the middle of the chain when no store is named", () => {
    const { price } = truthOf("P102");
    expect(trueElasticity({ product: "P102", price: 1.5 })).toBeCloseTo(price.elasticityBelow, 12);
    expect(trueElasticity({ product: "P102", price: 1.5, store: "S03" })).toBeCloseTo(0.6 * price.elasticityBelow, 12);
  });

  it("says so when asked for a product or store that Larkmoor does not have", () => {
    expect(() => trueCurve({ product: "P999", driver: "price" })).toThrow('Larkmoor has no product "P999".');
    expect(() => trueCurve({ product: "P101", driver: "price", store: "S99" })).toThrow('Larkmoor has no store "S99".');
    const elsewhere = { product: "P101", store: "S99" };
    expect(() => storeLevel(elsewhere)).toThrow('Larkmoor sells no product "P101" in a store "S99".');
  });
});
