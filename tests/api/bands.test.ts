import type { Agent } from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Comparison } from "@shared/contract/comparisons";
import type { Curve } from "@shared/contract/drivers";
import type { Prediction } from "@shared/contract/scenarios";
import { bandModel, covarianceQuadratic, designTransposeTimes, normalQuantile, parseModel, serialiseModel, termCurve } from "@shared/engine";
import type { FittedModel } from "@shared/engine";
import { varianceOfSum } from "@shared/planning";
import { fitProduct } from "../../server/features/drivers";
import { addPerson, signedIn } from "../support/people";
import { loadSample, sample, sampleDraft } from "../support/sample-sales";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let planner: Agent;
let modelId: string;
let scenarioId: string;
/** A1's model as it was fitted: penalties taken as known. */
let fitted: FittedModel;

beforeAll(async () => {
  test = await startTestApp({ now: () => sample.now });
  await loadSample(test.services);
  const person = await addPerson(test.services, { roles: ["planner"] });
  planner = await signedIn(test.app, person.email);
  modelId = (await fitProduct(test.services, { product: "JAM", personId: person.id, putInUse: true })).modelId;
  scenarioId = (await planner.post("/api/scenarios").send(sampleDraft).expect(201)).body.id;
  fitted = bandModel(await keptModel(), "pointwise");
});
afterAll(() => test.stop());

async function keptModel(): Promise<FittedModel> {
  const { body } = await planner.get(`/api/models/${modelId}/fits?stores=A1`).expect(200);
  return parseModel(body.items[0].fit);
}

async function shown() {
  const { body: drawn } = await planner.get(`/api/models/${modelId}/curves?store=A1&level=0.9&points=40`).expect(200);
  const { body: compared }: { body: Comparison } = await planner.get("/api/comparisons?product=JAM&anchor=1.6&level=0.9").expect(200);
  const { body: predicted }: { body: Prediction } = await planner.post(`/api/scenarios/${scenarioId}/predict`).send({ level: 0.9 }).expect(200);
  const store = compared.stores.find(({ store: code }) => code === "A1");
  return { drawn, compared: store, comparedBand: compared.band, chain: compared.chain, predicted };
}

const near = (found: readonly number[], expected: Iterable<number>) =>
  [...expected].forEach((value, index) => expect(found[index]).toBeCloseTo(value, 8));

describe("A store's fit", () => {
  it("is kept with the covariance averaged over penalties, which its text says", async () => {
    const kept = await keptModel();
    expect(kept.band).toBe("averaged");
    expect(fitted.terms.some(({ penalties }) => penalties.length > 0)).toBe(true);
    near(Array.from(kept.covariance), bandModel(fitted, "averaged").covariance);
  });
});

describe("Bands that pages show", () => {
  it("are those the engine averages over penalties: of every curve, and of the elasticity", async () => {
    const { drawn } = await shown();
    expect(drawn.band).toBe("averaged");
    const curves: Curve[] = drawn.curves;
    for (const { term, lower, upper, elasticity } of curves) {
      const options = { points: 40, level: 0.9, derivative: elasticity !== null };
      const own = termCurve(fitted, term, { ...options, band: "averaged" });
      near(lower, own.lower);
      near(upper, own.upper);
      near(elasticity?.upper ?? [], own.derivative?.upper ?? []);
      const [width, narrow] = [own, termCurve(fitted, term, options)].map(({ standardError }) => standardError.reduce((sum, value) => sum + value, 0));
      if (curves.find((curve) => curve.term === term)?.kind !== "factor") expect(width).toBeGreaterThan(1.02 * narrow);
    }
  });

  it("are so of differences between prices, and of elasticities, across stores", async () => {
    const { compared, comparedBand } = await shown();
    expect(comparedBand).toBe("averaged");
    const curve = compared?.curve;
    if (!curve) throw new Error("A1 has no curve.");
    const averaged = bandModel(fitted, "averaged");
    const term = fitted.terms.find(({ id }) => id === "price");
    if (!term) throw new Error("The model has no price.");
    const known = { promotion: ["none"], yearFraction: [0.5], temperatureC: [15], logExposure: [0] };
    const rowAt = (price: number) => designTransposeTimes(averaged, { ...known, price: [price] }, Float64Array.of(1));
    const anchor = rowAt(1.6);
    curve.x.map(Number).forEach((price, index) => {
      const difference = rowAt(price).map((value, at) => value - anchor[at]);
      expect(curve.standardError[index]).toBeCloseTo(Math.sqrt(Math.max(0, covarianceQuadratic(averaged, difference, difference))), 7);
    });
    const { derivative } = termCurve(fitted, "price", { at: [1.6], level: 0.9, band: "averaged", derivative: true });
    expect(compared?.elasticity?.lower).toBeCloseTo(derivative?.lower[0] ?? NaN, 8);
  });
});

describe("A model whose bands take smoothness as given", () => {
  it("says so: local regression has no penalty to average over", async () => {
    const spec = { response: "units", family: "quasi-poisson", offset: "logExposure", terms: [{ kind: "local-regression", column: "price", span: 0.7 }] };
    const { body } = await planner.post("/api/models").send({ product: "JAM", stores: ["A1"], spec }).expect(201);
    expect((await planner.get(`/api/models/${body.id}/curves?store=A1`).expect(200)).body.band).toBe("pointwise");
    expect((await planner.get(`/api/comparisons?product=JAM&model=${body.id}`).expect(200)).body.band).toBe("pointwise");
  });
});

describe("The chain's elasticity", () => {
  it("has an interval in which what smoothing may hide is the same in all stores", async () => {
    const { chain } = await shown();
    const [{ body }, { body: model }] = await Promise.all([planner.get(`/api/models/${modelId}/fits`), planner.get(`/api/models/${modelId}`)]);
    const parts = body.items.map(({ fit }: { fit: string }, index: number) => {
      const weight: number = model.fits[index].meanBaseUnits;
      const kept = parseModel(fit);
      const [all, known] = [kept, bandModel(kept, "pointwise")].map((of) => termCurve(of, "price", { at: [1.6], derivative: true }).derivative?.standardError[0] ?? NaN);
      return { weight, all: (weight * all) ** 2, known: (weight * known) ** 2 };
    });
    const total = parts.reduce((sum: number, { weight }: { weight: number }) => sum + weight, 0);
    const half = (normalQuantile(0.9) * Math.sqrt(varianceOfSum(parts))) / total;
    expect(parts).toHaveLength(3);
    expect(chain?.elasticity?.upper).toBeCloseTo((chain?.elasticity?.estimate ?? NaN) + half, 8);
  });
});

describe("A fit kept before models said which band they have", () => {
  it("is shown with the same bands, and predicts plans with the same intervals", async () => {
    const before = await shown();
    const old = serialiseModel(fitted).replace('"band":"pointwise",', "");
    expect(old).not.toMatch(/"band"/);
    await test.services.pool.query(
      "update model_fits set fit = $1 where model_id = $2 and store_id = (select id from stores where code = 'A1')",
      [old, modelId],
    );
    expect((await keptModel()).band).toBe("pointwise");
    const after = await shown();
    expect(after.drawn.band).toBe("averaged");
    after.drawn.curves.forEach((curve: Curve, index: number) => near(curve.upper, before.drawn.curves[index].upper));
    near(after.compared?.curve?.upper ?? [], before.compared?.curve?.upper ?? []);
    for (const figure of ["units", "lift"] as const) {
      expect(after.predicted[figure].lower / before.predicted[figure].lower).toBeCloseTo(1, 6);
      expect(after.predicted[figure].upper / before.predicted[figure].upper).toBeCloseTo(1, 6);
    }
  });
});
