import type { Agent } from "supertest";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Comparison } from "@shared/contract/comparisons";
import { parseModel, termCurve } from "@shared/engine";
import { fitProduct } from "../../server/features/drivers";
import { addPerson, signedIn } from "../support/people";
import { loadSample, sample, sampleRows } from "../support/sample-sales";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let planner: Agent;
let personId: string;
let modelId: string;

beforeAll(async () => {
  test = await startTestApp({ now: () => sample.now });
  await loadSample(test.services);
  const person = await addPerson(test.services, { roles: ["planner"] });
  personId = person.id;
  planner = await signedIn(test.app, person.email);
});
afterAll(() => test.stop());

async function compare(query = "product=JAM"): Promise<Comparison> {
  const { body } = await planner.get(`/api/comparisons?${query}`).expect(200);
  return body;
}

describe("GET /api/comparisons", () => {
  it("says what to do where a product has no model in use", async () => {
    const { body } = await planner.get("/api/comparisons?product=JAM").expect(422);
    expect(body).toMatchObject({ code: "no-model-in-use", detail: expect.stringContaining("Drivers page") });
    modelId = (await fitProduct(test.services, { product: "JAM", personId, putInUse: true })).modelId;
  });

  it("draws every store's price curve on one grid, relative to the chain's regular price", async () => {
    const comparison = await compare();
    expect(comparison).toMatchObject({
      product: "JAM",
      modelId,
      driver: "price",
      level: 0.8,
      anchor: sample.regularPrice,
    });
    expect(comparison.stores.map(({ store }) => store)).toEqual(["A1", "A2", "B1", "B2"]);
    const curves = comparison.stores.map(({ curve }) => curve).filter((curve) => curve !== null);
    expect(curves).toHaveLength(3);
    for (const curve of curves) {
      expect(curve.x).toEqual(curves[0].x);
      expect(curve.x).toHaveLength(61);
      expect(curve.observedRange).toEqual([1.5, 2.1]);
      expect(curve.seen).toHaveLength(104);
    }
    expect(curves[0].x[0]).toBe(1.5);
    expect(curves[0].x[60]).toBe(2.1);
  });

  it("has curve and band at zero at the anchor, and the engine's own differences elsewhere", async () => {
    const { stores, anchor } = await compare("product=JAM&anchor=1.5&level=0.95");
    expect(anchor).toBe(1.5);
    const { body } = await planner.get(`/api/models/${modelId}/fits?stores=A2`).expect(200);
    const model = parseModel(body.items[0].fit);
    const curve = stores.find(({ store }) => store === "A2")?.curve;
    if (!curve) throw new Error("A2 has no curve.");
    const x = curve.x.map(Number);
    expect([curve.estimate[0], curve.lower[0], curve.upper[0]]).toEqual([0, 0, 0]);
    const own = termCurve(model, "price", { at: [...x, 1.5], level: 0.95 });
    x.forEach((_, index) =>
      expect(curve.estimate[index]).toBeCloseTo(own.estimate[index] - own.estimate[x.length], 12),
    );
    // Two nearly uncorrelated ends: the difference's error lies between that of its parts and their sum.
    const last = x.length - 1;
    expect(curve.standardError[last]).toBeGreaterThan(0);
    expect(curve.standardError[last]).toBeLessThanOrEqual(
      own.standardError[last] + own.standardError[x.length] + 1e-12,
    );
    expect(curve.upper[last] - curve.estimate[last]).toBeCloseTo(1.959964 * curve.standardError[last], 5);
  });

  it("tells each store's elasticity at the anchor, near the truth the sales were made with", async () => {
    const { stores } = await compare();
    for (const { code, elasticity } of sample.stores.slice(0, 3)) {
      const found = stores.find(({ store }) => store === code)?.elasticity;
      expect(found?.estimate).toBeGreaterThan(elasticity - 0.5);
      expect(found?.estimate).toBeLessThan(elasticity + 0.5);
      expect(found?.lower).toBeLessThan(found?.estimate ?? 0);
      expect(found?.upper).toBeGreaterThan(found?.estimate ?? 0);
    }
  });

  it("tells mean weekly units, and why a store has no curve", async () => {
    const { stores } = await compare();
    const units = sampleRows()
      .filter(({ store }) => store === "A1")
      .map((row) => row.units);
    expect(stores[0].meanWeeklyUnits).toBeCloseTo(units.reduce((sum, value) => sum + value, 0) / 104, 9);
    expect(stores[3]).toMatchObject({
      store: "B2",
      curve: null,
      elasticity: null,
      reason: expect.stringMatching(/^5 weeks/),
    });
  });

  it("adds the chain: the mean of the stores' multipliers by base units", async () => {
    const { stores, chain } = await compare();
    const { body: model } = await planner.get(`/api/models/${modelId}`).expect(200);
    const weights = model.fits.map(({ meanBaseUnits }: { meanBaseUnits: number }) => meanBaseUnits);
    const total = weights.reduce((sum: number, value: number) => sum + value, 0);
    const curves = stores.map(({ curve }) => curve).filter((curve) => curve !== null);
    const expected = curves.reduce(
      (sum, curve, index) => sum + (weights[index] / total) * Math.exp(curve.estimate[0]),
      0,
    );
    expect(chain?.estimate[0]).toBeCloseTo(Math.log(expected), 12);
    expect(chain?.x).toEqual(curves[0].x);
    const slopes = stores.slice(0, 3).map(({ elasticity }) => elasticity?.estimate ?? Number.NaN);
    expect(chain?.elasticity?.estimate).toBeCloseTo(
      slopes.reduce((sum, slope, index) => sum + (weights[index] / total) * slope, 0),
      12,
    );
  });

  it("compares levels and times of year too, without an anchor", async () => {
    const promotion = await compare("product=JAM&driver=promotion");
    expect(promotion.anchor).toBeNull();
    expect(promotion.chain?.x[0]).toBe("none");
    expect(promotion.chain?.estimate[0]).toBe(0);
    expect(promotion.stores[0].curve?.kind).toBe("factor");
    const season = await compare("product=JAM&driver=season&points=25");
    expect(season.stores[0].curve?.x).toHaveLength(25);
    expect(season.stores[0].curve?.x[24]).toBe(1);
  });

  it("gives the reason for a driver no store could learn", async () => {
    const comparison = await compare("product=JAM&driver=event");
    expect(comparison.chain).toBeNull();
    expect(comparison.stores[0]).toMatchObject({ curve: null, reason: "There was no week with an event." });
  });

  it("refuses unknown codes and models, models of another product, and strangers", async () => {
    await planner
      .get("/api/comparisons?product=NONE")
      .expect(422)
      .expect(/unknown-product/);
    await planner
      .get(`/api/comparisons?product=TEA&model=${modelId}`)
      .expect(422)
      .expect(/model-of-other-product/);
    await planner.get("/api/comparisons?product=JAM&model=6f1f7a52-5c3c-4c3b-9d55-2f3a1e0c7d11").expect(404);
    await planner.get("/api/comparisons?product=JAM&anchor=-1").expect(422);
    await request(test.app).get("/api/comparisons?product=JAM").expect(401);
  });
});
