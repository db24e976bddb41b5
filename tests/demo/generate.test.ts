import { createHash } from "node:crypto";
import { describe, expect, it } from "vitest";
import { products } from "../../demo/chain/products";
import { stores } from "../../demo/chain/stores";
import { generateDemo } from "../../demo/generate";
import { demoFiles } from "../../demo/write";
import type { SalesRow } from "../../demo/types";

const demo = generateDemo();

const digest = (files: Record<string, string>) => createHash("sha256").update(JSON.stringify(files)).digest("hex");

/** Runs `check` on the rows of each product in each store. */
function forEachSeries(check: (rows: SalesRow[], name: string) => void) {
  const series = new Map<string, SalesRow[]>();
  for (const row of demo.sales) {
    const name = `${row.product} in ${row.store}`;
    const rows = series.get(name);
    if (rows) rows.push(row);
    else series.set(name, [row]);
  }
  expect(series.size).toBe(products.length * stores.length);
  series.forEach(check);
}

describe("The generated demo", () => {
  it("has a sales row for each product, store and week, in the order of week, store and product", () => {
    expect(demo.sales).toHaveLength(18 * 24 * 156);
    const keys = demo.sales.map(({ week, store, product }) => `${week} ${store} ${product}`);
    expect(new Set(keys).size).toBe(keys.length);
    expect(keys).toEqual([...keys].sort());
  });

  it("is the same to the byte for the same seed, and another for another", () => {
    expect(digest(demoFiles(generateDemo()))).toBe(digest(demoFiles(demo)));
    expect(digest(demoFiles(generateDemo({ seed: 1 })))).not.toBe(digest(demoFiles(demo)));
  });

  it("ends with the last week before the day it is made for", () => {
    expect(demo.sales.at(-1)?.week).toBe("2026-05-25");
    const later = generateDemo({ today: "2026-12-01" });
    expect(later.sales.at(-1)?.week).toBe("2026-11-23");
    expect(later.sales[0].week).toBe("2023-12-04");
    expect(later.temperatures).toHaveLength(3 * 156);
  });

  it("knows the temperature of each week and region, in a range that such places have", () => {
    expect(demo.temperatures).toHaveLength(3 * 156);
    for (const { temperatureC } of demo.temperatures) {
      expect(temperatureC).toBeGreaterThan(-12);
      expect(temperatureC).toBeLessThan(32);
    }
  });

  it("knows the events of the coming year, for plans", () => {
    const coming = demo.events.filter(({ firstDay }) => firstDay > "2026-05-31");
    expect(new Set(coming.map(({ event }) => event)).size).toBe(5);
  });

  it("never asks more than the regular price, marks every cut, and adds units x price up to net sales", () => {
    const wrong = demo.sales.filter(
      (row) =>
        row.shelfPrice > row.regularPrice ||
        row.mechanic !== (row.shelfPrice < row.regularPrice ? "price_cut" : "none") ||
        Math.abs(row.netSales - row.units * row.shelfPrice) > 0.005 + 1e-9 ||
        row.units < 0,
    );
    expect(wrong).toEqual([]);
  });

  it("moves prices without promotion in at least five weeks of every series, at three regular prices or more", () => {
    forEachSeries((rows, name) => {
      const quiet = rows.filter((row) => !row.feature && !row.display);
      const usual = rows.at(-1)?.regularPrice;
      expect(quiet.filter((row) => row.shelfPrice !== usual).length, name).toBeGreaterThanOrEqual(5);
      expect(new Set(rows.map((row) => row.regularPrice)).size, name).toBeGreaterThanOrEqual(3);
    });
  });

  it("shows every promotion level to every series, and every depth with and without support", () => {
    forEachSeries((rows, name) => {
      const levels = new Set(rows.map((row) => `${row.feature}/${row.display}`));
      expect(levels.size, name).toBe(4);
    });
    const cuts = demo.sales.filter(({ mechanic }) => mechanic === "price_cut");
    const depthOf = (row: SalesRow) => 1 - row.shelfPrice / row.regularPrice;
    for (const supported of [true, false]) {
      const depths = cuts.filter((row) => (row.feature || row.display) === supported).map(depthOf);
      expect(Math.min(...depths)).toBeLessThan(0.1);
      expect(Math.max(...depths)).toBeGreaterThan(0.28);
    }
    expect(demo.sales.some((row) => row.mechanic === "none" && row.feature)).toBe(true);
  });

  it("sells fractions of a unit only of the product sold by weight", () => {
    const fractional = demo.sales.filter(({ units }) => !Number.isInteger(units)).map(({ product }) => product);
    const byWeight = products.filter(({ soldByWeight }) => soldByWeight).map(({ code }) => code);
    expect([...new Set(fractional)]).toEqual(byWeight);
  });

  it("takes well under ten seconds", () => {
    const start = performance.now();
    demoFiles(generateDemo({ seed: 2 }));
    expect(performance.now() - start).toBeLessThan(10_000);
  });
});
