import type { Agent } from "supertest";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { addWeeks } from "@shared/calendar";
import type { Scenario, ScenarioDraft } from "@shared/contract/scenarios";
import { fitProduct } from "../../server/features/drivers";
import { createScenario } from "../../server/features/scenarios";
import { addPerson, signedIn } from "../support/people";
import { loadSample, sample, sampleDraft } from "../support/sample-sales";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let planner: Agent;
let colleague: Agent;
let plannerId: string;
let modelId: string;
let now = sample.now;

beforeAll(async () => {
  test = await startTestApp({ now: () => now });
  await loadSample(test.services);
  const person = await addPerson(test.services, { roles: ["planner"], name: "Pia Planner" });
  plannerId = person.id;
  planner = await signedIn(test.app, person.email);
  const other = await addPerson(test.services, {
    roles: ["planner"],
    name: "Otto Other",
    email: "otto@chain.example",
  });
  colleague = await signedIn(test.app, other.email);
});
afterAll(() => test.stop());

const draft = sampleDraft;
const { weeks } = draft;
const unknown = "6f1f7a52-5c3c-4c3b-9d55-2f3a1e0c7d11";

async function create(changes: Partial<ScenarioDraft> = {}): Promise<Scenario> {
  const { body } = await planner
    .post("/api/scenarios")
    .send({ ...draft, ...changes })
    .expect(201);
  return body;
}

const contextPath = `/api/planning-context?product=JAM&stores=A1,A2,B2&first=${weeks.first}&last=${weeks.last}`;

describe("a product without a model in use", () => {
  it("cannot be planned, and the answer says what to do", async () => {
    for (const answer of [await planner.post("/api/scenarios").send(draft), await planner.get(contextPath)]) {
      expect(answer.status).toBe(422);
      expect(answer.body).toMatchObject({ code: "no-model-in-use", detail: expect.stringContaining("/api/models") });
    }
    modelId = (await fitProduct(test.services, { product: "JAM", personId: plannerId, putInUse: true })).modelId;
  });
});

describe("POST and GET /api/scenarios", () => {
  it("saves a draft and gives it back with its version", async () => {
    const answer = await planner.post("/api/scenarios").send(draft).expect(201);
    expect(answer.headers).toMatchObject({ etag: '"1"', location: `/api/scenarios/${answer.body.id}` });
    const read = await colleague.get(`/api/scenarios/${answer.body.id}`).expect(200);
    expect(read.headers.etag).toBe('"1"');
    expect(read.body).toEqual(answer.body);
    expect(read.body).toMatchObject({
      ...draft,
      modelId,
      state: "draft",
      version: 1,
      createdBy: { id: plannerId, name: "Pia Planner" },
      createdAt: sample.now.toISOString(),
      may: { edit: true },
    });
  });

  it("can be created by the server itself, with the same checks", async () => {
    const em = test.services.orm.em.fork();
    const scenario = await createScenario({ em, draft, personId: plannerId, now });
    expect((await planner.get(`/api/scenarios/${scenario.id}`).expect(200)).body.name).toBe("Winter jam");
    const wrong = createScenario({
      em: test.services.orm.em.fork(),
      draft: { ...draft, stores: ["Z9"], cells: [] },
      personId: plannerId,
      now,
    });
    await expect(wrong).rejects.toMatchObject({ status: 422, code: "unknown-store" });
  });

  it("names what is wrong with a draft, where it is", async () => {
    const refused = async (changes: object, code: string, path: string, message: RegExp) => {
      const { body } = await planner
        .post("/api/scenarios")
        .send({ ...draft, ...changes })
        .expect(422);
      expect(body).toMatchObject({ code, detail: expect.stringMatching(message) });
      expect(body.errors?.map((error: { path: string }) => error.path)).toContain(path);
    };
    const cells = (...list: object[]) => ({ cells: list });
    await refused({ product: "NONE" }, "unknown-product", "product", /"NONE"/);
    await refused({ stores: ["A1", "Q7"], cells: [] }, "unknown-store", "stores.1", /"Q7"/);
    await refused({ stores: ["A1", "A1"], cells: [] }, "store-repeated", "stores.1", /"A1" comes twice/);
    await refused(
      { weeks: { first: "2026-01-13", last: weeks.last } },
      "not-a-week",
      "weeks.first",
      /Monday: write 2026-01-12/,
    );
    await refused(
      { weeks: { first: weeks.last, last: weeks.first } },
      "weeks-reversed",
      "weeks.first",
      /after the last/,
    );
    await refused(
      { weeks: { first: weeks.first, last: addWeeks(weeks.first, 104) } },
      "too-many-weeks",
      "weeks.last",
      /105 weeks: a plan has at most 104/,
    );
    await refused(cells({ store: "B1", week: weeks.first }), "cell-outside-plan", "cells.0.store", /"B1"/);
    await refused(cells({ store: "A1", week: "2026-03-02" }), "cell-outside-plan", "cells.0.week", /2026-03-02/);
    await refused(cells({ store: "A1", week: "2026-01-20" }), "cell-outside-plan", "cells.0.week", /2026-01-20/);
    await refused(cells(draft.cells[0], draft.cells[0]), "cell-repeated", "cells.1", /comes twice/);
    await refused(
      cells({ store: "A1", week: weeks.first, price: 0 }),
      "invalid-request",
      "cells.0.price",
      /above zero/,
    );
    await refused(
      cells({ store: "A1", week: weeks.first, promotion: "fireworks" }),
      "invalid-request",
      "cells.0.promotion",
      /./,
    );
    await refused(cells({ store: "A1", week: weeks.first, colour: "red" }), "invalid-request", "cells.0", /./);
    await refused({ name: " " }, "invalid-request", "name", /name/);
    await planner
      .post("/api/scenarios")
      .send({ ...draft, modelId: unknown })
      .expect(404);
  });

  it("refuses strangers, people who do not plan, and unknown scenarios", async () => {
    await request(test.app).post("/api/scenarios").send(draft).expect(401);
    await request(test.app).get(`/api/scenarios/${unknown}`).expect(401);
    const { email } = await addPerson(test.services, { roles: ["data-admin"] });
    const admin = await signedIn(test.app, email);
    await admin.post("/api/scenarios").send(draft).expect(403);
    const scenario = await create();
    expect((await admin.get(`/api/scenarios/${scenario.id}`).expect(200)).body.may).toEqual({ edit: false });
    await planner.get(`/api/scenarios/${unknown}`).expect(404);
    await planner.get("/api/scenarios/nonsense").expect(404);
    await planner.post("/api/scenarios").expect(422);
  });
});

describe("PUT /api/scenarios/:id", () => {
  it("saves over the version it was read at, and raises it", async () => {
    const { id } = await create();
    now = new Date(sample.now.getTime() + 60_000);
    const answer = await colleague
      .put(`/api/scenarios/${id}`)
      .set("If-Match", '"1"')
      .send({ ...draft, name: "Colder jam", cells: [] })
      .expect(200);
    now = sample.now;
    expect(answer.headers.etag).toBe('"2"');
    expect(answer.body).toMatchObject({
      name: "Colder jam",
      cells: [],
      version: 2,
      updatedBy: { name: "Otto Other" },
      createdBy: { name: "Pia Planner" },
    });
    expect(answer.body.updatedAt > answer.body.createdAt).toBe(true);
  });

  it("asks for the version with 428, and refuses an old one with 412 that says who saved meanwhile", async () => {
    const { id } = await create();
    await planner
      .put(`/api/scenarios/${id}`)
      .send(draft)
      .expect(428)
      .expect(/version-required/);
    await colleague
      .put(`/api/scenarios/${id}`)
      .set("If-Match", '"1"')
      .send({ ...draft, name: "Otto's" })
      .expect(200);
    const late = await planner
      .put(`/api/scenarios/${id}`)
      .set("If-Match", '"1"')
      .send({ ...draft, name: "Pia's" })
      .expect(412);
    expect(late.body).toMatchObject({
      code: "changed-meanwhile",
      detail: expect.stringMatching(/Otto Other saved version 2/),
    });
    expect(late.headers.etag).toBe('"2"');
    await planner.put(`/api/scenarios/${id}`).set("If-Match", "elephant").send(draft).expect(412);
    expect((await planner.get(`/api/scenarios/${id}`)).body.name).toBe("Otto's");
  });

  it("lets one of two saves at the same moment win", async () => {
    const { id } = await create();
    const answers = await Promise.all(
      [planner, colleague].map((agent, index) =>
        agent
          .put(`/api/scenarios/${id}`)
          .set("If-Match", '"1"')
          .send({ ...draft, name: `Name ${index}` }),
      ),
    );
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 412]);
    const winner = answers.findIndex(({ status }) => status === 200);
    expect((await planner.get(`/api/scenarios/${id}`)).body).toMatchObject({ name: `Name ${winner}`, version: 2 });
  });

  it("keeps its model when another one comes into use, until it asks for that one", async () => {
    const { id } = await create();
    const next = await fitProduct(test.services, { product: "JAM", personId: plannerId, putInUse: true });
    const kept = await planner.put(`/api/scenarios/${id}`).set("If-Match", '"1"').send(draft).expect(200);
    expect(kept.body).toMatchObject({ modelId, model: { id: modelId, state: "retired" } });
    const moved = await planner
      .put(`/api/scenarios/${id}`)
      .set("If-Match", '"2"')
      .send({ ...draft, modelId: next.modelId })
      .expect(200);
    const taken = { id: next.modelId, state: "in-use", fittedAt: expect.stringMatching(/^20/) };
    expect(moved.body).toMatchObject({ modelId: next.modelId, model: taken });
    const { body: listed } = await planner.get("/api/scenarios").expect(200);
    expect(listed.items.find((item: { id: string }) => item.id === id)).toMatchObject({ model: taken });
    expect((await planner.get(`/api/scenarios/${id}`).expect(200)).body.model).toEqual(moved.body.model);
    modelId = next.modelId;
  });

  it("changes only what is still being written", async () => {
    const { id } = await create();
    await test.services.pool.query("update scenarios set state = 'sent' where id = $1", [id]);
    const { body } = await planner.put(`/api/scenarios/${id}`).set("If-Match", '"1"').send(draft).expect(409);
    expect(body.code).toBe("not-editable");
    expect((await planner.get(`/api/scenarios/${id}`)).body.may).toEqual({ edit: false });
    await planner.delete(`/api/scenarios/${id}`).expect(409);
    await test.services.pool.query("update scenarios set state = 'returned' where id = $1", [id]);
    await planner.put(`/api/scenarios/${id}`).set("If-Match", '"1"').send(draft).expect(200);
  });

  it("checks what is saved like what is created, and stores nothing of it", async () => {
    const { id } = await create();
    const wrong = { ...draft, name: "Wrong", weeks: { first: "2026-01-13", last: weeks.last } };
    await planner.put(`/api/scenarios/${id}`).set("If-Match", '"1"').send(wrong).expect(422);
    await request(test.app).put(`/api/scenarios/${id}`).set("If-Match", '"1"').send(draft).expect(401);
    const { email } = await addPerson(test.services, { roles: ["data-admin"], email: "dora@chain.example" });
    const dataAdmin = await signedIn(test.app, email);
    await dataAdmin.put(`/api/scenarios/${id}`).set("If-Match", '"1"').send(draft).expect(403);
    await planner.put(`/api/scenarios/${unknown}`).set("If-Match", '"1"').send(draft).expect(404);
    expect((await planner.get(`/api/scenarios/${id}`)).body).toMatchObject({ name: "Winter jam", version: 1 });
  });
});

describe("GET /api/scenarios", () => {
  it("pages through scenarios, last changed first, each once", async () => {
    await test.services.pool.query("delete from scenarios");
    const made: string[] = [];
    for (let index = 0; index < 5; index++) {
      // Two share a moment: the cursor must not lose either.
      now = new Date(sample.now.getTime() + 1000 * Math.floor(index / 2));
      made.push((await create({ name: `Plan ${index}` })).id);
    }
    now = sample.now;
    const seen: string[] = [];
    let cursor: string | null = null;
    do {
      const next: string = cursor === null ? "" : `&cursor=${cursor}`;
      const { body } = await planner.get(`/api/scenarios?limit=2${next}`).expect(200);
      seen.push(...body.items.map(({ id }: { id: string }) => id));
      expect(body.items[0]).not.toHaveProperty("cells");
      cursor = body.nextCursor;
    } while (cursor !== null);
    expect(new Set(seen)).toEqual(new Set(made));
    expect(seen).toHaveLength(5);
    expect(seen[0]).toBe(made[4]);
    expect((await planner.get("/api/scenarios?product=TEA").expect(200)).body.items).toEqual([]);
    expect((await planner.get("/api/scenarios?product=JAM").expect(200)).body.items).toHaveLength(5);
  });

  it("refuses a cursor it did not give, and strangers", async () => {
    await planner
      .get("/api/scenarios?cursor=elephant")
      .expect(422)
      .expect(/unknown-cursor/);
    await planner.get("/api/scenarios?limit=0").expect(422);
    await request(test.app).get("/api/scenarios").expect(401);
  });
});

describe("DELETE /api/scenarios/:id", () => {
  it("deletes one's own draft only", async () => {
    const { id } = await create();
    await request(test.app).delete(`/api/scenarios/${id}`).expect(401);
    await colleague
      .delete(`/api/scenarios/${id}`)
      .expect(403)
      .expect(/not-your-scenario/);
    await planner.delete(`/api/scenarios/${id}`).expect(204);
    const { rows } = await test.services.pool.query(
      "select action, person_id from audit_entries where subject_id = $1 order by id",
      [id],
    );
    expect(rows).toEqual([
      { action: "scenario.created", person_id: plannerId },
      { action: "scenario.deleted", person_id: plannerId },
    ]);
    await planner.get(`/api/scenarios/${id}`).expect(404);
    await planner.delete(`/api/scenarios/${id}`).expect(404);
  });
});
