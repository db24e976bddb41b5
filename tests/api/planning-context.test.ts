import type { Agent } from "supertest";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { BaseCell, Prediction, ScenarioDraft } from "@shared/contract/scenarios";
import { parseModel } from "@shared/engine";
import { planInput, predictScenario } from "@shared/planning";
import { fitProduct } from "../../server/features/drivers";
import { addPerson, signedIn } from "../support/people";
import { loadSample, sample, sampleDraft, sampleTemperature } from "../support/sample-sales";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let planner: Agent;
let plannerId: string;
let modelId: string;

beforeAll(async () => {
  test = await startTestApp({ now: () => sample.now });
  await loadSample(test.services);
  const person = await addPerson(test.services, { roles: ["planner"] });
  plannerId = person.id;
  planner = await signedIn(test.app, person.email);
});
afterAll(() => test.stop());

const { weeks } = sampleDraft;
const contextPath = `/api/planning-context?product=JAM&stores=A1,A2,B2&first=${weeks.first}&last=${weeks.last}`;
const unknown = "6f1f7a52-5c3c-4c3b-9d55-2f3a1e0c7d11";

async function create(changes: Partial<ScenarioDraft> = {}): Promise<string> {
  const { body } = await planner
    .post("/api/scenarios")
    .send({ ...sampleDraft, ...changes })
    .expect(201);
  return body.id;
}

describe("GET /api/planning-context", () => {
  it("says what to do where the product has no model in use", async () => {
    const { body } = await planner.get(contextPath).expect(422);
    expect(body).toMatchObject({ code: "no-model-in-use", detail: expect.stringContaining("/api/models") });
    modelId = (await fitProduct(test.services, { product: "JAM", personId: plannerId, putInUse: true })).modelId;
  });

  it("gives each store-week's base: prices and costs as announced, events, normal weather", async () => {
    const { body } = await planner.get(contextPath).expect(200);
    expect(body.modelId).toBe(modelId);
    expect(body.base).toHaveLength(18);
    const at = (store: string, week: string): BaseCell =>
      body.base.find((cell: BaseCell) => cell.store === store && cell.week === week);
    expect(at("A1", "2026-01-19")).toMatchObject({
      regularPrice: 2,
      unitCost: 1.1,
      taxRate: 0.2,
      event: "fair",
      weekIndex: 2924,
    });
    expect(at("A1", "2026-01-26")).toMatchObject({ event: "fair" });
    expect(at("A1", "2026-02-02")).toMatchObject({ regularPrice: 2.2, unitCost: 1.15, event: null });
    expect(at("B2", "2026-01-19")).toMatchObject({ event: null });
    // Both other years count alike: the mean of the same weeks of 2024 and 2025, smoothed.
    const around = (sampleTemperature("coast", "2024-01-22") + sampleTemperature("coast", "2025-01-20")) / 2;
    expect(at("A1", "2026-01-19").normalTemperatureC).toBeGreaterThan(around - 0.5);
    expect(at("A1", "2026-01-19").normalTemperatureC).toBeLessThan(around + 0.5);
    expect(at("B2", "2026-01-19").normalTemperatureC).toBeLessThan(at("A1", "2026-01-19").normalTemperatureC ?? 0);
  });

  it("lets what a store's own sales told last go before older terms", async () => {
    const of = (week: string) =>
      `update weekly_sales set regular_price = $1, unit_cost = $2
       where week = '${week}' and store_id = (select id from stores where code = 'A1')`;
    await test.services.pool.query(of(sample.lastWeek), [1.95, 1.05]);
    const { body } = await planner.get(contextPath).expect(200);
    const at = (week: string) => body.base.find((cell: BaseCell) => cell.store === "A1" && cell.week === week);
    expect(at("2026-01-19")).toMatchObject({ regularPrice: 1.95, unitCost: 1.05 });
    expect(at("2026-02-09")).toMatchObject({ regularPrice: 2.2, unitCost: 1.15 });
    await test.services.pool.query(of(sample.lastWeek), [2, null]);
  });

  it("gives the fits there are, the year before, and says which stores have no model and why", async () => {
    const { body } = await planner.get(contextPath).expect(200);
    expect(body.fits.map(({ store }: { store: string }) => store)).toEqual(["A1", "A2"]);
    const weeksOfA1 = body.history
      .filter(({ store }: { store: string }) => store === "A1")
      .map(({ week }: { week: string }) => week);
    expect(weeksOfA1).toHaveLength(53);
    expect(weeksOfA1[52]).toBe(sample.lastWeek);
    expect(body.notes[0]).toBe("1 store has no model: B2.");
    expect(body.notes[1]).toMatch(/^Store B2 could not be fitted: 5 weeks/);
  });

  it("refuses weeks and codes it does not know, and strangers", async () => {
    const path = (query: string) => `/api/planning-context?${query}`;
    await planner
      .get(path(`product=JAM&stores=A1&first=2026-01-13&last=${weeks.last}`))
      .expect(422)
      .expect(/not-a-week/);
    await planner
      .get(path(`product=JAM&stores=Q7&first=${weeks.first}&last=${weeks.last}`))
      .expect(422)
      .expect(/Q7/);
    await planner
      .get(path(`product=NONE&stores=A1&first=${weeks.first}&last=${weeks.last}`))
      .expect(422)
      .expect(/NONE/);
    await planner.get(path(`product=JAM&stores=A1&first=${weeks.first}`)).expect(422);
    await request(test.app).get(contextPath).expect(401);
  });
});

describe("POST /api/scenarios/:id/predict", () => {
  it("equals what the browser's code makes of the planning context", async () => {
    const id = await create();
    const { body: predicted } = await planner.post(`/api/scenarios/${id}/predict`).send({ level: 0.9 }).expect(200);
    const { body: context } = await planner.get(`${contextPath}&model=${modelId}`).expect(200);
    const models = new Map<string, ReturnType<typeof parseModel>>(
      context.fits.map(({ store, fit }: { store: string; fit: string }) => [store, parseModel(fit)]),
    );
    const { stores, cells, leftOut } = planInput({ base: context.base, changes: sampleDraft.cells, models });
    const own = predictScenario({ stores, cells, level: 0.9, costs: { fixedCost: 40 } });
    const figures: Prediction = predicted;
    for (const key of ["units", "lift", "weather"] as const) expect(figures[key]).toEqual(own[key]);
    expect(figures.split).toEqual(own.split);
    expect(figures.weeks).toEqual(own.weeks);
    expect(figures.stores).toEqual(own.stores);
    expect(figures).toMatchObject({
      level: 0.9,
      baseUnits: own.baseUnits,
      netGain: own.money.netGain,
      breakEven: own.money.breakEven,
    });
    expect(leftOut).toEqual([{ store: "B2", weeks: 6, reason: "the store has no model" }]);
    expect(figures.flags.at(-1)).toMatchObject({
      code: "left-out",
      stores: ["B2"],
      detail: "6 weeks of store B2 left out: the store has no model.",
    });
    expect(figures.lift.estimate).toBeGreaterThan(0.05);
    expect(figures.split.reduce((sum, row) => sum + row.units, figures.baseUnits)).toBeCloseTo(
      figures.units.estimate,
      8,
    );
  });

  it("takes 80 % for the level unless told otherwise", async () => {
    const id = await create();
    expect((await planner.post(`/api/scenarios/${id}/predict`).expect(200)).body.level).toBe(0.8);
    await planner.post(`/api/scenarios/${id}/predict`).send({ level: 3 }).expect(422);
  });

  it("says so where no store of the plan has a model", async () => {
    const id = await create({ stores: ["B2"], cells: [] });
    const { body } = await planner.post(`/api/scenarios/${id}/predict`).expect(422);
    expect(body).toMatchObject({
      code: "nothing-to-predict",
      detail: expect.stringContaining("1 store has no model: B2."),
    });
  });

  it("refuses unknown scenarios and strangers", async () => {
    await planner.post(`/api/scenarios/${unknown}/predict`).expect(404);
    await request(test.app).post(`/api/scenarios/${unknown}/predict`).expect(401);
  });
});
