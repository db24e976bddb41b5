import { describe, expect, it } from "vitest";
import { priceLearning, sharedValue } from "@shared/planning";
import { aSalesRow, salesRows } from "./a-sales-row";

const withPrices = (prices: (number | null)[]) => salesRows(prices.length, (index) => ({ price: prices[index] }));

describe("how much there was to learn about price", () => {
  it("counts weeks whose price moved from the week before", () => {
    expect(priceLearning(withPrices([1.79, 1.79, 1.49, 1.79, 1.79]))).toEqual({ weeksMoved: 2, regularPrices: 1, enough: false });
  });

  it("does not count moves into and out of promotions", () => {
    const rows = withPrices([1.79, 1.49, 1.79, 1.49, 1.79, 1.39, 1.79]);
    rows[1].feature = true;
    rows[3].display = true;
    rows[5].mechanic = "multi_buy";
    expect(priceLearning(rows).weeksMoved).toBe(0);
  });

  it("counts a price cut without support, and passes over weeks without a price", () => {
    const rows = withPrices([1.79, null, 1.49, 1.79]);
    rows[2].mechanic = "price_cut";
    expect(priceLearning(rows).weeksMoved).toBe(2);
  });

  it("takes wavering by half a percent for the same price", () => {
    expect(priceLearning(withPrices([1.79, 1.792, 1.786, 1.79])).weeksMoved).toBe(0);
  });

  it("does not depend on the order of rows, and is enough from five moves on", () => {
    const rows = withPrices([1, 2, 1, 2, 1, 2]);
    expect(priceLearning(rows)).toEqual({ weeksMoved: 5, regularPrices: 1, enough: true });
    expect(priceLearning([...rows].reverse())).toEqual(priceLearning(rows));
  });

  it("counts distinct regular prices, known ones only", () => {
    const rows = [1.79, 1.89, null, 1.79].map((regularPrice) => aSalesRow({ regularPrice }));
    expect(priceLearning(rows).regularPrices).toBe(2);
  });
});

describe("values of several store-weeks", () => {
  it("are one value when they agree, else mixed, in ascending order", () => {
    expect(sharedValue([1.49, 1.49])).toEqual({ kind: "same", value: 1.49 });
    expect(sharedValue([10, 9, 10, 1])).toEqual({ kind: "mixed", values: [1, 9, 10] });
    expect(sharedValue(["none", "feature", "none"])).toEqual({ kind: "mixed", values: ["feature", "none"] });
    expect(sharedValue([])).toEqual({ kind: "none" });
  });
});
