import { describe, expect, it } from "vitest";
import { commonestPrice, modelledPrice } from "@shared/planning";
import type { PriceEvidence } from "@shared/planning";

const evidence: PriceEvidence = { shelfPrice: 1.59, units: 10, netSales: 14.9, regionPrice: 1.69, regularPrice: 1.79 };

describe("the modelled price", () => {
  it("is the shelf price when the extract has it", () => {
    expect(modelledPrice(evidence)).toEqual({ price: 1.59, source: "shelf" });
  });

  it("is else what was paid per unit", () => {
    expect(modelledPrice({ ...evidence, shelfPrice: null })).toEqual({ price: 1.49, source: "paid" });
    expect(modelledPrice({ ...evidence, shelfPrice: null, units: 3, netSales: 5 })).toEqual({ price: 1.6667, source: "paid" });
  });

  it("is in a week without sales the region's commonest price, else the regular price", () => {
    const unsold = { ...evidence, shelfPrice: null, units: 0, netSales: 0 };
    expect(modelledPrice(unsold)).toEqual({ price: 1.69, source: "region" });
    expect(modelledPrice({ ...unsold, regionPrice: null })).toEqual({ price: 1.79, source: "regular" });
    expect(modelledPrice({ ...unsold, units: -2, netSales: -3.58 })).toEqual({ price: 1.69, source: "region" });
  });

  it("passes over values that are no price", () => {
    expect(modelledPrice({ ...evidence, shelfPrice: 0, netSales: 0 })).toEqual({ price: 1.69, source: "region" });
    expect(modelledPrice({ ...evidence, shelfPrice: Number.NaN })).toEqual({ price: 1.49, source: "paid" });
  });

  it("is unknown when nothing tells it", () => {
    expect(modelledPrice({ shelfPrice: null, units: 0, netSales: 0, regionPrice: null, regularPrice: null })).toEqual({
      price: null,
      source: "unknown",
    });
  });
});

describe("a region's commonest price", () => {
  it("is the one most stores had", () => {
    expect(commonestPrice([1.49, 1.79, 1.79, 1.59])).toBe(1.79);
  });

  it("is the lowest of several equally common ones, whatever the order of stores", () => {
    expect(commonestPrice([1.79, 1.49, 1.49, 1.79])).toBe(1.49);
    expect(commonestPrice([1.49, 1.79])).toBe(commonestPrice([1.79, 1.49]));
  });

  it("counts prices that agree to 4 decimals as one, and is null without any", () => {
    expect(commonestPrice([1.5, 1.790_001, 1.790_02])).toBe(1.79);
    expect(commonestPrice([])).toBeNull();
  });
});
