import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { listProducts, listStores } from "@shared/contract/catalogue";
import { loadExtract } from "../../server/features/extracts";
import { checkedDirectly, loadCatalogueDirectly, productsFile, read, startExtractsApp, type ExtractsApp } from "../support/extracts";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());

/** Loads a file of the catalogue and answers how many rows were new, changed and there already. */
async function load(kind: "stores" | "products" | "events" | "temperatures", ...lines: string[]) {
  const { id, state, failure } = await checkedDirectly(test, { kind, file: lines.join("\n") });
  expect({ state, failure }).toEqual({ state: "checked", failure: null });
  return loadExtract(test.services, { extractId: id });
}

async function productsOn(day?: string) {
  const { body } = await read(test, `/api/products${day === undefined ? "" : `?on=${day}`}`).expect(200);
  return listProducts.response!.parse(body).items;
}

describe("the list of stores", () => {
  it("has every store by code, as the file gave it", async () => {
    const { body } = await read(test, "/api/stores").expect(200);
    const { items } = listStores.response!.parse(body);
    expect(items.map(({ code }) => code)).toEqual(["S1", "S2", "S3", "S4"]);
    expect(items[0]).toEqual({ code: "S1", name: "Harbour Street", region: "coast", opened: "2015-03-02", closed: null, version: expect.any(String) });
  });

  it("is for people who have signed in", async () => {
    await request(test.app).get("/api/stores").expect(401);
    await request(test.app).get("/api/products").expect(401);
  });
});

describe("the list of products", () => {
  it("has what holds today unless a day is asked for", async () => {
    // Today is 15 June 2026; other terms hold from 1 May 2026.
    const terms = async (day?: string) => (await productsOn(day)).map(({ code, unitCost, regularPrice, taxRate }) => [code, unitCost, regularPrice, taxRate]);
    expect(await terms()).toEqual([["P1", 0.9, 1.99, 0.21], ["P2", null, 2.49, 0.09]]);
    expect(await terms("2026-04-30")).toEqual([["P1", 0.8, 1.79, 0.21], ["P2", null, 2.49, 0.09]]);
    expect(await terms("2024-12-31")).toEqual([["P1", null, null, 0], ["P2", null, null, 0]]);
  });

  it("describes each product", async () => {
    const [bar, apples] = await productsOn();
    expect(bar).toMatchObject({ code: "P1", name: "Oat bar", gtin: "2000000000015", brand: "Larkfield", category: "snacks", categoryName: "snacks", soldByWeight: false });
    expect(apples).toMatchObject({ code: "P2", gtin: null, brand: null, category: "fruit", soldByWeight: true });
  });

  it("refuses a day that is none", async () => {
    const { body } = await read(test, "/api/products?on=yesterday").expect(422);
    expect(body).toMatchObject({ code: "invalid-request", errors: [{ path: "on", message: "Give a date as YYYY-MM-DD." }] });
  });
});

describe("loading the catalogue", () => {
  it("counts a product's row as changed where the product or its terms differ, and the same file as the same", async () => {
    expect(await load("products", productsFile)).toEqual({ new: 0, changed: 0, same: 3, missing: 0 });
    expect(await load("products", productsFile.replace("0.90,1.99", "0.95,1.99"))).toEqual({ new: 0, changed: 1, same: 2, missing: 0 });
    expect(await load("products", productsFile.replaceAll("Oat bar", "Oat bar, large").replaceAll("P1,Oat bar, large", 'P1,"Oat bar, large"')))
      .toEqual({ new: 0, changed: 2, same: 1, missing: 0 });
    expect((await productsOn())[0]).toMatchObject({ name: "Oat bar, large", unitCost: 0.9 });
  });

  it("takes a product without cost, price, tax or day as one whose terms hold from the beginning", async () => {
    expect(await load("products", "product,name,category", "P3,Rye bar,snacks")).toEqual({ new: 1, changed: 0, same: 0, missing: 0 });
    expect((await productsOn("1990-06-14")).find(({ code }) => code === "P3")).toMatchObject({ unitCost: null, regularPrice: null, taxRate: 0 });
  });

  it("changes a store that moved region, and removes none", async () => {
    expect(await load("stores", "store,name,region,closed", "S4,High Moor,town,2026-12-31", "S5,New Road,town,")).toEqual({ new: 1, changed: 1, same: 0, missing: 0 });
    const { body } = await read(test, "/api/stores");
    expect(body.items.map(({ code, region }: { code: string; region: string }) => `${code} ${region}`)).toEqual(["S1 coast", "S2 coast", "S3 coast", "S4 town", "S5 town"]);
    expect(body.items[3]).toMatchObject({ closed: "2026-12-31" });
  });

  it("keeps an event's occurrences apart by day and region", async () => {
    const header = "event,name,first_day,last_day,region";
    expect(await load("events", header, "fair,Summer fair,2026-06-05,2026-06-07,", "fair,Summer fair,2025-06-06,2025-06-08,coast")).toEqual({ new: 2, changed: 0, same: 0, missing: 0 });
    expect(await load("events", header, "fair,Summer fair,2026-06-05,2026-06-08,", "fair,Summer fair,2025-06-06,2025-06-08,coast")).toEqual({ new: 0, changed: 1, same: 1, missing: 0 });
    const { rows } = await test.services.pool.query("select first_day, last_day, region from events order by first_day");
    expect(rows).toEqual([{ first_day: "2025-06-06", last_day: "2025-06-08", region: "coast" }, { first_day: "2026-06-05", last_day: "2026-06-08", region: "" }]);
  });

  it("keeps temperatures by region and by store", async () => {
    expect(await load("temperatures", "week,region,store,temperature_c", "2026-06-01,coast,,14.5", "2026-W23,,S1,-2")).toEqual({ new: 2, changed: 0, same: 0, missing: 0 });
    expect(await load("temperatures", "week,region,temperature_c", "2026-06-01,coast,15")).toEqual({ new: 0, changed: 1, same: 0, missing: 0 });
    const { rows } = await test.services.pool.query("select week, region, store_code, temperature_c from temperatures order by region");
    expect(rows).toEqual([
      { week: "2026-06-01", region: "", store_code: "S1", temperature_c: -2 }, { week: "2026-06-01", region: "coast", store_code: "", temperature_c: 15 },
    ]);
  });
});
