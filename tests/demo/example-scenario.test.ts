import { describe, expect, it } from "vitest";
import { weeksApart } from "@shared/calendar";
import { scenarioDraftSchema } from "@shared/contract/scenarios";
import { products } from "../../demo/chain/products";
import { stores } from "../../demo/chain/stores";
import { generateDemo } from "../../demo/generate";
import { exampleScenario } from "../../demo/load/example-scenario";

const lastWeek = "2026-05-25";
const scenario = exampleScenario(lastWeek);

describe("The demo's example scenario", () => {
  it("is a draft that the contract takes as it stands", () => {
    expect(scenarioDraftSchema.parse(scenario)).toEqual(scenario);
  });

  it("plans six coming weeks in six stores on the coast, one cell each", () => {
    const regions = scenario.stores.map((code) => stores.find((store) => store.code === code)?.region);
    expect(regions).toEqual(new Array(6).fill("Coast"));
    expect(weeksApart(lastWeek, scenario.weeks.first)).toBeGreaterThan(0);
    expect(weeksApart(scenario.weeks.first, scenario.weeks.last)).toBe(5);
    const cells = scenario.cells.map(({ store, week }) => `${store} ${week}`);
    expect(new Set(cells).size).toBe(36);
  });

  it("cuts a price to one that the stores have asked before", () => {
    const product = products.find(({ code }) => code === scenario.product);
    const price = scenario.cells[0].price ?? Number.NaN;
    expect(price).toBeLessThan(product?.prices.at(-1)?.regularPrice ?? 0);
    const seen = generateDemo().sales.filter((row) => row.product === scenario.product && row.shelfPrice === price);
    const storesSeen = new Set(seen.map(({ store }) => store));
    expect(scenario.stores.filter((store) => !storesSeen.has(store))).toEqual([]);
  });
});
