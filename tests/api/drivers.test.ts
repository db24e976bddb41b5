import type { Agent } from "supertest";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { parseModel, predict, termCurve } from "@shared/engine";
import { fitModelsJob } from "../../server/features/drivers/drivers.jobs";
import { ModelEntity, fitProduct } from "../../server/features/drivers";
import { createLogger } from "../../server/logger";
import { hasEnded, waitForJob } from "../support/jobs";
import { addPerson, signedIn } from "../support/people";
import { loadSample, sample, sampleRows } from "../support/sample-sales";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let planner: Agent;
let manager: Agent;
let plannerId: string;
let now: Date = sample.now;

beforeAll(async () => {
  test = await startTestApp({ worker: true, now: () => now });
  await loadSample(test.services);
  const person = await addPerson(test.services, { roles: ["planner"] });
  plannerId = person.id;
  planner = await signedIn(test.app, person.email);
  const { email } = await addPerson(test.services, { roles: ["category-manager"], categories: ["spreads"] });
  manager = await signedIn(test.app, email);
});
afterAll(() => test.stop());

const logLog = {
  response: "units",
  family: "log-gaussian",
  terms: [{ kind: "linear", column: "price", log: true }],
} as const;

const fitAt = (store: string, body: object = {}) =>
  planner.post("/api/models").send({ product: "JAM", stores: [store], ...body });

describe("POST /api/models for one store", () => {
  it("finds the elasticity that a regression by hand finds", async () => {
    const { body } = await fitAt("A2", { spec: logLog }).expect(201);
    const rows = sampleRows().filter(({ store }) => store === "A2");
    const x = rows.map(({ price }) => Math.log(price));
    const y = rows.map(({ units }) => Math.log(units));
    const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
    const [meanX, meanY] = [mean(x), mean(y)];
    const covariance = x.reduce((sum, value, index) => sum + (value - meanX) * (y[index] - meanY), 0);
    const variance = x.reduce((sum, value) => sum + (value - meanX) ** 2, 0);
    const slope = covariance / variance;
    const residuals = y.map((value, index) => value - meanY - slope * (x[index] - meanX));
    const scale = residuals.reduce((sum, value) => sum + value * value, 0) / (rows.length - 2);

    const price = body.coefficients.find(({ name }: { name: string }) => name === "price");
    expect(price.value).toBeCloseTo(slope, 10);
    expect(price.standardError).toBeCloseTo(Math.sqrt(scale / variance), 10);
    expect(body.edf).toBeCloseTo(2, 10);
    expect(body.fitted).toHaveLength(104);
    expect(body.fitted[0]).toMatchObject({ store: "A2", week: sample.firstWeek });
  });

  it("fits the default specification, and keeps a model that survives the way to the database and back", async () => {
    const { body } = await fitAt("A1").expect(201);
    expect(body.terms.map(({ id }: { id: string }) => id)).toEqual([
      "price",
      "promotion",
      "yearFraction",
      "temperatureC",
    ]);
    const { body: kept } = await planner.get(`/api/models/${body.id}/fits`).expect(200);
    expect(kept.items).toHaveLength(1);
    const model = parseModel(kept.items[0].fit);
    expect(body.fitted.map(({ value }: { value: number }) => value)).toEqual(Array.from(model.fitted));
    expect(body.coefficients.map(({ value }: { value: number }) => value)).toEqual(Array.from(model.coefficients));

    const { body: drawn } = await planner
      .get(`/api/models/${body.id}/curves?store=A1&level=0.9&points=40`)
      .expect(200);
    const price = drawn.curves.find(({ driver }: { driver: string }) => driver === "price");
    const curve = termCurve(model, "price", { points: 40, level: 0.9, derivative: true });
    expect(price).toMatchObject({
      kind: "smooth",
      column: "price",
      estimate: Array.from(curve.estimate),
      upper: Array.from(curve.upper),
    });
    expect(price.elasticity.estimate).toEqual(Array.from(curve.derivative?.estimate ?? []));
    expect(price.seen).toHaveLength(104);
    const promotion = drawn.curves.find(({ driver }: { driver: string }) => driver === "promotion");
    expect(promotion).toMatchObject({ kind: "factor", seen: [], elasticity: null, observedRange: null });
    expect(promotion.x).toContain("none");
    expect(
      predict(model, { price: [2], promotion: ["none"], yearFraction: [0.5], temperatureC: [15], logExposure: [0] })
        .mean[0],
    ).toBeGreaterThan(0);
  });

  it("tells what can be said of the fit", async () => {
    const { body: created } = await fitAt("B1").expect(201);
    const { body } = await planner.get(`/api/models/${created.id}`).expect(200);
    expect(body).toMatchObject({
      product: "JAM",
      state: "candidate",
      spec: null,
      createdBy: "Test Person",
      skipped: [],
      notForPlans: null,
    });
    expect(body.fits).toHaveLength(1);
    expect(body.fits[0]).toMatchObject({
      store: "B1",
      rows: 104,
      firstWeek: sample.firstWeek,
      lastWeek: sample.lastWeek,
      converged: true,
      stockOuts: { leftOut: 0, partly: 0 },
    });
    expect(body.fits[0].leftOut.map(({ driver }: { driver: string }) => driver)).toEqual(["mechanic", "event"]);
    expect(body.fits[0].meanBaseUnits).toBeGreaterThan(20);
    expect(body.fits[0].meanBaseUnits).toBeLessThan(body.fits[0].meanWeeklyUnits);
  });

  it("leaves an entry in the audit trail", async () => {
    const { body } = await fitAt("A1").expect(201);
    const { rows } = await test.services.pool.query(
      "select action, person_id, detail from audit_entries where subject_kind = 'model' and subject_id = $1",
      [body.id],
    );
    expect(rows).toEqual([
      { action: "model.fitted", person_id: plannerId, detail: { product: "JAM", stores: 1, weeks: null } },
    ]);
  });

  it("keeps to the weeks asked for", async () => {
    const { body } = await fitAt("A1", { weeks: { first: "2025-01-01", last: "2025-06-30" } }).expect(201);
    expect(
      body.fitted
        .map(({ week }: { week: string }) => week)
        .sort()
        .at(0),
    ).toBe("2025-01-06");
    expect(body.fitted).toHaveLength(26);
  });

  it("refuses what it cannot use, and says why and what to do", async () => {
    const refused = async (body: object, code: string, detail: RegExp) => {
      const answer = await planner.post("/api/models").send(body).expect(422);
      expect(answer.body).toMatchObject({ code, detail: expect.stringMatching(detail) });
    };
    await refused({ product: "NONE", stores: ["A1"] }, "unknown-product", /"NONE"/);
    await refused({ product: "JAM", stores: ["A1", "Q7"] }, "unknown-store", /"Q7"/);
    await refused({ product: "TEA", stores: ["A1"] }, "no-sales", /"A1".*"TEA"/);
    await refused({ product: "TEA" }, "no-sales", /"TEA"/);
    await refused({ product: "JAM", stores: ["B2"] }, "too-few-weeks", /5 weeks .* at least 8/);
    await refused(
      { product: "JAM", stores: ["A1"], weeks: { first: "2025-01-06", last: "2024-01-01" } },
      "weeks-reversed",
      /2025-01-06/,
    );
    await refused({ product: "JAM", stores: [] }, "invalid-request", /./);
    const spec = (term: object) => ({ product: "JAM", stores: ["A1"], spec: { ...logLog, terms: [term] } });
    await refused(spec({ kind: "linear", column: "moonlight" }), "column-missing", /moonlight/);
    await refused(spec({ kind: "smooth", column: "regularPrice" }), "column-constant", /regularPrice/);
    const curves = Array.from({ length: 20 }, (_, index) => ({
      kind: "smooth",
      id: `curve ${index}`,
      column: "price",
      size: 40,
    }));
    await refused(
      { product: "JAM", stores: ["A1"], spec: { ...logLog, terms: curves } },
      "spec-too-large",
      /800 coefficients: at most 240/,
    );
    await refused(spec({ kind: "wavelet", column: "price" }), "invalid-request", /./);
  });

  it("refuses a body that is none, strangers, and people who do not fit models", async () => {
    await planner.post("/api/models").expect(422);
    await planner
      .post("/api/models")
      .set("content-type", "application/json")
      .send("{")
      .expect(400)
      .expect(/malformed-json/);
    await request(test.app).post("/api/models").send({ product: "JAM" }).expect(401);
    const { email } = await addPerson(test.services, { roles: ["data-admin"] });
    const admin = await signedIn(test.app, email);
    await admin
      .post("/api/models")
      .send({ product: "JAM", stores: ["A1"] })
      .expect(403)
      .expect(/not-allowed/);
  });
});

describe("a product's first model", () => {
  it("is put in use by the chain's rule, which the audit trail says", async () => {
    const { body } = await planner.get("/api/models?product=JAM&state=in-use").expect(200);
    expect(body.items).toHaveLength(1);
    const { rows } = await test.services.pool.query(
      "select person_id, detail from audit_entries where action = 'model.used' and subject_id = $1",
      [body.items[0].id],
    );
    expect(rows).toEqual([{ person_id: null, detail: { rule: "first model of its product" } }]);
  });
});

describe("POST /api/models for all stores", () => {
  it("fits each store in the background, skips those it cannot fit, and says so", async () => {
    const answer = await planner.post("/api/models").send({ product: "JAM" }).expect(202);
    expect(answer.headers.location).toBe(`/api/jobs/${answer.body.jobId}`);
    const job = await waitForJob(test.services, answer.body.jobId, hasEnded);
    expect(job).toMatchObject({ state: "succeeded", done: 4, total: 4, subject: `/api/models/${answer.body.id}` });
    expect(job.result).toMatchObject({
      fitted: 3,
      skipped: [{ store: "B2", reason: expect.stringMatching(/^5 weeks/) }],
    });

    const { body } = await planner.get(`/api/models/${answer.body.id}`).expect(200);
    expect(body.fits.map(({ store }: { store: string }) => store)).toEqual(["A1", "A2", "B1"]);
    expect(body).toMatchObject({
      state: "candidate",
      jobId: answer.body.jobId,
      skipped: [{ store: "B2" }],
      may: { use: false },
    });
    const { body: some } = await planner.get(`/api/models/${answer.body.id}/fits?stores=A2,B2`).expect(200);
    expect(some.items.map(({ store }: { store: string }) => store)).toEqual(["A2"]);
    const { body: without } = await planner.get(`/api/models/${answer.body.id}/curves?store=B2`).expect(404);
    expect(without).toMatchObject({ code: "no-fit", detail: expect.stringMatching(/"B2".*5 weeks/) });
  });

  it("leaves no model where no store could be fitted", async () => {
    const before = await planner.get("/api/models?product=JAM").expect(200);
    const answer = await planner
      .post("/api/models")
      .send({ product: "JAM", stores: ["B2", "A1"], weeks: { first: "2025-12-01", last: "2025-12-22" } })
      .expect(202);
    const job = await waitForJob(test.services, answer.body.jobId, (row) => hasEnded(row) && !row.cleanupPending);
    expect(job).toMatchObject({
      state: "failed",
      error: { code: "nothing-fitted", detail: expect.stringContaining("B2") },
    });
    await planner.get(`/api/models/${answer.body.id}`).expect(404);
    const after = await planner.get("/api/models?product=JAM").expect(200);
    expect(after.body.items).toHaveLength(before.body.items.length);
  });

  it("goes on where a run before it ended", async () => {
    const em = test.services.orm.em.fork();
    const { rows: stores } = await test.services.pool.query<{ id: number; code: string }>(
      "select id, code from stores order by code",
    );
    const {
      rows: [{ id: productId }],
    } = await test.services.pool.query("select id from products where code = 'JAM'");
    const model = em.create(ModelEntity, { product: productId, createdBy: plannerId, createdAt: sample.now });
    await em.persist(model).flush();
    const { services } = test;
    const run = (progress: () => Promise<void>) =>
      fitModelsJob.run({
        payload: { modelId: model.id, stores },
        jobId: model.id,
        em: services.orm.em.fork(),
        services,
        logger: createLogger("silent"),
        now: sample.now,
        signal: new AbortController().signal,
        progress,
      });
    let done = 0;
    await expect(
      run(async () => {
        if (++done === 2) throw new Error("killed");
      }),
    ).rejects.toThrow("killed");
    const written = async () =>
      (
        await services.pool.query(
          "select store_id, xmin::text from model_fits where model_id = $1 order by store_id",
          [model.id],
        )
      ).rows;
    const first = await written();
    expect(first).toHaveLength(2);
    await expect(run(async () => undefined)).resolves.toMatchObject({ fitted: 3, skipped: [{ store: "B2" }] });
    const all = await written();
    expect(all).toHaveLength(3);
    expect(all.slice(0, 2)).toEqual(first);
    await expect(run(async () => undefined)).resolves.toMatchObject({ fitted: 3 });
    expect(await written()).toEqual(all);
  });
});

describe("PUT /api/models/:id/use", () => {
  it("puts a model in use in place of the one before, for a manager of its category", async () => {
    const { body: candidate } = await fitAt("A2").expect(201);
    const { body: before } = await planner.get("/api/models?product=JAM&state=in-use").expect(200);
    expect((await manager.get(`/api/models/${candidate.id}`).expect(200)).body.may).toEqual({ use: true });
    const { body } = await manager.put(`/api/models/${candidate.id}/use`).expect(200);
    expect(body).toMatchObject({
      id: candidate.id,
      state: "in-use",
      usedFrom: sample.now.toISOString(),
      may: { use: false },
    });
    await manager.put(`/api/models/${candidate.id}/use`).expect(200);
    const { body: retired } = await planner.get(`/api/models/${before.items[0].id}`).expect(200);
    expect(retired).toMatchObject({ state: "retired", usedUntil: sample.now.toISOString() });
    const { body: inUse } = await planner.get("/api/models?product=JAM&state=in-use").expect(200);
    expect(inUse.items.map(({ id }: { id: string }) => id)).toEqual([candidate.id]);
    const { rows } = await test.services.pool.query(
      "select count(*)::int as times from audit_entries where action = 'model.used' and subject_id = $1",
      [candidate.id],
    );
    expect(rows[0].times).toBe(1);
  });

  it("lets exactly one of two managers win at the same moment", async () => {
    const { body: one } = await fitAt("A1").expect(201);
    const { body: other } = await fitAt("B1").expect(201);
    const answers = await Promise.all([one.id, other.id].map((id) => manager.put(`/api/models/${id}/use`)));
    expect(answers.map(({ status }) => status)).toEqual([200, 200]);
    const { rows } = await test.services.pool.query(
      "select count(*)::int as number from models where state = 'in-use'",
    );
    expect(rows[0].number).toBe(1);
  });

  it("refuses planners, managers of other categories and strangers", async () => {
    const { body: candidate } = await fitAt("A1").expect(201);
    await planner
      .put(`/api/models/${candidate.id}/use`)
      .expect(403)
      .expect(/not-allowed/);
    const { email } = await addPerson(test.services, {
      roles: ["category-manager"],
      categories: ["drinks"],
      email: "drinks@chain.example",
    });
    const other = await signedIn(test.app, email);
    const { body } = await other.put(`/api/models/${candidate.id}/use`).expect(403);
    expect(body).toMatchObject({ code: "not-your-category", detail: expect.stringContaining("spreads") });
    await request(test.app).put(`/api/models/${candidate.id}/use`).expect(401);
  });

  it("refuses a model that plans cannot use, and one that does not exist", async () => {
    const terms = [...logLog.terms, { kind: "linear", column: "weekIndex" }];
    const { body: trend } = await fitAt("A1", { spec: { ...logLog, terms } }).expect(201);
    const { body } = await manager.put(`/api/models/${trend.id}/use`).expect(422);
    expect(body).toMatchObject({ code: "not-for-plans", detail: expect.stringContaining("weekIndex") });
    await manager.put("/api/models/6f1f7a52-5c3c-4c3b-9d55-2f3a1e0c7d11/use").expect(404);
    await manager.put("/api/models/none/use").expect(404);
  });
});

describe("reading models", () => {
  it("lists a product's models, newest first", async () => {
    const { body } = await planner.get("/api/models?product=JAM").expect(200);
    now = new Date(sample.now.getTime() + 60_000);
    const { body: made } = await fitAt("A1").expect(201);
    now = sample.now;
    const ids = ({ items }: { items: { id: string }[] }) => items.map(({ id }) => id);
    const { body: after } = await planner.get("/api/models?product=JAM").expect(200);
    expect(ids(after)).toEqual([made.id, ...ids(body)]);
    expect((await planner.get("/api/models?product=TEA").expect(200)).body.items).toEqual([]);
  });

  it("refuses unknown models, codes and strangers", async () => {
    const unknown = "6f1f7a52-5c3c-4c3b-9d55-2f3a1e0c7d11";
    await planner
      .get("/api/models?product=NONE")
      .expect(422)
      .expect(/unknown-product/);
    await planner.get("/api/models").expect(422);
    await planner.get("/api/models?product=JAM&state=sleeping").expect(422);
    for (const path of ["", "/fits", "/curves?store=A1"]) {
      await planner.get(`/api/models/${unknown}${path}`).expect(404);
      await request(test.app).get(`/api/models/${unknown}${path}`).expect(401);
    }
    const { body: made } = await fitAt("A1").expect(201);
    await planner
      .get(`/api/models/${made.id}/curves?store=Z9`)
      .expect(422)
      .expect(/unknown-store/);
    await planner.get(`/api/models/${made.id}/curves?store=A1&level=2`).expect(422);
    await planner.get(`/api/models/${made.id}/curves`).expect(422);
    await request(test.app).get("/api/models?product=JAM").expect(401);
  });
});

describe("fitProduct", () => {
  it("fits all stores without a job and puts the model in use", async () => {
    const outcome = await fitProduct(test.services, { product: "JAM", personId: plannerId, putInUse: true });
    expect(outcome).toMatchObject({ fitted: 3, skipped: [{ store: "B2" }] });
    const { body } = await planner.get("/api/models?product=JAM&state=in-use").expect(200);
    expect(body.items.map(({ id }: { id: string }) => id)).toEqual([outcome.modelId]);
  });
});

describe("a model's newer weeks", () => {
  it("are those that were loaded since it was fitted, in its own product only", async () => {
    const { body: fitted } = await fitAt("A1").expect(201);
    const newerWeeks = async () => (await planner.get(`/api/models/${fitted.id}`).expect(200)).body.newerWeeks;
    expect(await newerWeeks()).toBe(0);
    const load = async (at: Date, first: string) => {
      const { rows } = await test.services.pool.query<{ id: string }>(
        `insert into extracts (id, kind, file_name, size_bytes, sha256, storage_key, state, uploaded_by_id, uploaded_at,
           loaded_at, first_week, last_week)
         values (gen_random_uuid(), 'sales', 'later.csv', 1, '0', 'k', 'loaded', $1, $2, $2, $3, $4) returning id`,
        [plannerId, at, first, sample.lastWeek],
      );
      await test.services.pool.query("update weekly_sales set extract_id = $1 where week >= $2", [rows[0].id, first]);
    };
    await load(new Date(now.getTime() - 1000), "2025-12-01");
    expect(await newerWeeks()).toBe(0);
    await load(new Date(now.getTime() + 1000), "2025-12-15");
    expect(await newerWeeks()).toBe(2);
    const { body: listed } = await planner.get("/api/models?product=JAM").expect(200);
    const same = listed.items.find(({ id }: { id: string }) => id === fitted.id);
    expect(same.newerWeeks).toBe(2);
    now = new Date(now.getTime() + 2000);
    const { body: anew } = await fitAt("A1").expect(201);
    expect((await planner.get(`/api/models/${anew.id}`).expect(200)).body.newerWeeks).toBe(0);
  });
});
