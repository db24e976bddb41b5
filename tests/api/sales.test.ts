import type { Agent } from "supertest";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { signedInAs } from "../support/people";
import { loadSample, sampleRows } from "../support/sample-sales";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let planner: Agent;

beforeAll(async () => {
  test = await startTestApp();
  await loadSample(test.services);
  planner = await signedInAs(test.app, test.services, ["planner"]);
});
afterAll(() => test.stop());

describe("GET /api/sales", () => {
  it("gives a product's weeks in one store, filled up from the catalogue", async () => {
    const { body } = await planner.get("/api/sales?product=JAM&store=A1").expect(200);
    const [first] = sampleRows();
    expect(body.items).toHaveLength(104);
    expect(body.items[0]).toEqual({
      week: first.week,
      units: first.units,
      netSales: first.units * first.price,
      price: first.price,
      priceSource: "shelf",
      regularPrice: 2,
      promotion: "both",
      mechanic: "none",
      temperatureC: first.temperatureC,
      event: null,
      openDays: null,
      stockOutDays: null,
    });
  });

  it("keeps to the weeks asked for", async () => {
    const { body } = await planner
      .get("/api/sales?product=JAM&store=A1&first=2024-12-30&last=2025-01-06")
      .expect(200);
    expect(body.items.map(({ week }: { week: string }) => week)).toEqual(["2024-12-30", "2025-01-06"]);
  });

  it("takes a row's own temperature and event first, then the store's, then the region's largest overlap", async () => {
    const run = (sql: string) => test.services.pool.query(sql);
    await run("insert into temperatures (week, store_code, temperature_c) values ('2024-06-03', 'B1', 31.5)");
    await run(`insert into events (code, name, first_day, last_day, region) values
      ('long', 'Long', '2024-06-05', '2024-06-12', ''), ('short', 'Short', '2024-06-03', '2024-06-04', 'moor'),
      ('elsewhere', 'Elsewhere', '2024-06-03', '2024-06-09', 'coast')`);
    const weeks = async () => {
      const { body } = await planner
        .get("/api/sales?product=JAM&store=B1&first=2024-06-03&last=2024-06-10")
        .expect(200);
      return body.items.map(({ temperatureC, event }: { temperatureC: number; event: string | null }) => ({
        temperatureC,
        event,
      }));
    };
    const regional = sampleRows().find(({ store, week }) => store === "B1" && week === "2024-06-10");
    expect(await weeks()).toEqual([
      { temperatureC: 31.5, event: "long" },
      { temperatureC: regional?.temperatureC, event: "long" },
    ]);

    await run(
      `update weekly_sales set temperature_c = 33, event = 'own'
       where week = '2024-06-03' and store_id = (select id from stores where code = 'B1')`,
    );
    expect((await weeks())[0]).toEqual({ temperatureC: 33, event: "own" });

    await run(`update weekly_sales set temperature_c = null, event = null where week = '2024-06-03'`);
    await run("delete from events where code in ('long', 'short', 'elsewhere')");
    await run("delete from temperatures where store_code = 'B1'");
  });

  it("refuses unknown codes by name, and strangers", async () => {
    const { body } = await planner.get("/api/sales?product=JAM&store=Z9").expect(422);
    expect(body).toMatchObject({ code: "unknown-store", detail: expect.stringContaining('"Z9"') });
    await planner
      .get("/api/sales?product=NONE&store=A1")
      .expect(422)
      .expect(/unknown-product/);
    await planner.get("/api/sales?product=JAM").expect(422);
    await request(test.app).get("/api/sales?product=JAM&store=A1").expect(401);
  });
});
