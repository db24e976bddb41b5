import { describe, expect, it } from "vitest";
import { yearFraction } from "@shared/calendar";
import { exposureOf, modelColumns, promotionOf, toModelData } from "@shared/planning";
import { aSalesRow, salesRows } from "./a-sales-row";

describe("columns of a sales model", () => {
  it("hold each week's drivers under the names a specification uses", () => {
    const { data } = toModelData([
      aSalesRow(),
      aSalesRow({ week: "2024-01-08", price: 1.49, feature: true, mechanic: "multi_buy", event: "carnival", units: 61.25 }),
    ]);
    expect(Object.keys(data).sort()).toEqual([
      "deal", "depth", "event", "logExposure", "mechanic", "price", "promotion", "regularPrice", "store", "temperatureC",
      "units", "weekIndex", "yearFraction",
    ]);
    expect([...data.units]).toEqual([40, 61.25]);
    expect([...data.price]).toEqual([1.79, 1.49]);
    expect([...data.depth]).toEqual([0, Math.log(1.49 / 1.79)]);
    expect(data.promotion).toEqual(["none", "feature"]);
    expect(data.mechanic).toEqual(["none", "multi_buy"]);
    expect(data.event).toEqual(["none", "carnival"]);
    expect([...data.yearFraction]).toEqual([yearFraction("2024-01-01"), yearFraction("2024-01-08")]);
    expect(Number(data.weekIndex[1]) - Number(data.weekIndex[0])).toBe(1);
    expect([...data.logExposure]).toEqual([0, 0]);
  });

  it("turn a price cut into depth and a deal, never into a mechanic", () => {
    const { data } = toModelData([aSalesRow({ mechanic: "price_cut", price: 1.49 })]);
    expect(data.mechanic).toEqual(["none"]);
    expect([...data.deal]).toEqual([1]);
  });

  it("name the four levels of support", () => {
    const pairs = [[false, false], [true, false], [false, true], [true, true]];
    const levels = pairs.map(([feature, display]) => promotionOf({ feature, display }));
    expect(levels).toEqual(["none", "feature", "display", "both"]);
  });

  it("leave a column out as a whole when a cell lacks its value", () => {
    const cell = {
      store: "S1", week: "2024-01-01", price: 1, regularPrice: null, promotion: "none", mechanic: "none", deal: 0, event: "none",
      temperatureC: null, exposure: 1,
    } as const;
    const data = modelColumns([cell, { ...cell, regularPrice: 2, temperatureC: 3 }]);
    expect(Object.keys(data)).not.toContain("depth");
    expect(Object.keys(data)).not.toContain("regularPrice");
    expect(Object.keys(data)).not.toContain("temperatureC");
  });
});

describe("weeks that are learnt from", () => {
  it("enter with the exposure that a partial stock-out left, and without those fully sold out", () => {
    const { data, counts } = toModelData([
      aSalesRow({ openDays: 6, stockOutDays: 2 }),
      aSalesRow({ openDays: 6, stockOutDays: 6 }),
      aSalesRow({ openDays: null, stockOutDays: 7 }),
      aSalesRow(),
    ]);
    expect([...data.logExposure]).toEqual([Math.log(4 / 6), 0]);
    expect(counts).toMatchObject({ rows: 4, kept: 2, soldOut: 2, partlySoldOut: 1 });
  });

  it("do not include weeks in which the store was closed or nothing tells the price", () => {
    const { rows, counts } = toModelData([
      aSalesRow({ openDays: 0 }),
      aSalesRow({ price: null, priceSource: "unknown" }),
      aSalesRow({ store: "S2" }),
    ]);
    expect(rows.map((row) => row.store)).toEqual(["S2"]);
    expect(counts).toMatchObject({ closed: 1, withoutPrice: 1, kept: 1 });
  });

  it("count net returns as zero units", () => {
    const { data, counts } = toModelData([aSalesRow({ units: -3 }), aSalesRow()]);
    expect([...data.units]).toEqual([0, 40]);
    expect(counts.netReturns).toBe(1);
  });

  it("lose weeks without a temperature when they are few, and the temperature itself when they are many", () => {
    const few = toModelData(salesRows(20, (index) => ({ temperatureC: index < 2 ? null : index })));
    expect(few.counts).toMatchObject({ kept: 18, withoutTemperature: 2 });
    expect(few.data.temperatureC).toHaveLength(18);
    const many = toModelData(salesRows(20, (index) => ({ temperatureC: index < 3 ? null : index })));
    expect(many.counts).toMatchObject({ kept: 20, withoutTemperature: 0 });
    expect(many.data.temperatureC).toBeUndefined();
  });

  it("and weeks left out add up to the weeks handed in", () => {
    const rows = salesRows(40, (index) => ({
      openDays: index % 7 === 0 ? 0 : 6,
      stockOutDays: index % 5,
      price: index % 11 === 0 ? null : 1.79,
      temperatureC: index === 13 ? null : 10,
      units: index - 3,
    }));
    const { counts, data } = toModelData(rows);
    const { kept, soldOut, closed, withoutPrice, withoutTemperature } = counts;
    expect(kept + soldOut + closed + withoutPrice + withoutTemperature).toBe(40);
    for (const column of Object.values(data)) expect(column).toHaveLength(kept);
  });
});

describe("exposure", () => {
  it("is the share of open days with goods on the shelf, between 0 and 1", () => {
    expect(exposureOf({ openDays: 6, stockOutDays: 3 })).toBe(0.5);
    expect(exposureOf({ openDays: null, stockOutDays: null })).toBe(1);
    expect(exposureOf({ openDays: 5, stockOutDays: 6 })).toBe(0);
    expect(exposureOf({ openDays: 5, stockOutDays: -1 })).toBe(1);
    expect(exposureOf({ openDays: 0, stockOutDays: 0 })).toBe(0);
  });
});
