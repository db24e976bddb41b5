import { randomUUID } from "node:crypto";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { UnknownCodes } from "@shared/contract/unknown-codes";
import { act, afterJob, checked, loadCatalogue, loaded, read, salesFile, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { bearerOf } from "../support/people";

let test: ExtractsApp;
let planner: string;

beforeAll(async () => {
  test = await startExtractsApp();
  planner = await bearerOf(test.app, test.services, ["planner"]);
  await loadCatalogue(test);
});
afterAll(() => test.stop());

const row = (week: string, store: string, product: string) => `${week},${store},${product},1,1.79,1.79,,0,0,none`;
const codesOf = async (id: string): Promise<UnknownCodes> => (await read(test, `/api/extracts/${id}/unknown-codes`).expect(200)).body;
const enter = (id: string, body: object) => act(test, `/api/extracts/${id}/unknown-codes`).send(body);

describe("codes of a file that the catalogue lacks", () => {
  it("are listed with their rows, first and last week, the most frequent first", async () => {
    const { id } = await checked(test, { file: salesFile(
      row("2026-06-08", "S70", "P1"), row("2026-06-01", "S71", "P1"), row("2026-05-25", "S71", "P70"), row("2026-06-08", "S71", "P1"), row("x", "S72", "P1"), row("2026-06-08", "S1", "P1"),
    ) });
    expect(await codesOf(id)).toEqual({
      stores: [
        { code: "S71", rows: 3, firstWeek: "2026-05-25", lastWeek: "2026-06-08" },
        { code: "S70", rows: 1, firstWeek: "2026-06-08", lastWeek: "2026-06-08" },
        { code: "S72", rows: 1, firstWeek: null, lastWeek: null },
      ],
      storesTotal: 3,
      products: [{ code: "P70", rows: 1, firstWeek: "2026-05-25", lastWeek: "2026-05-25" }],
      productsTotal: 1,
    });
  });

  it("are listed up to 500 of each, and counted beyond", async () => {
    const rows = Array.from({ length: 620 }, (_, at) => row("2026-06-08", "S1", `Q${String(at).padStart(3, "0")}`));
    const { id } = await checked(test, { file: salesFile(...rows, row("2026-06-01", "S1", "Q619"), row("2026-06-08", "S1", "P1")) });
    const { products, productsTotal } = await codesOf(id);
    expect([products.length, productsTotal, products[0]?.code, products[1]?.code, products.at(-1)?.code]).toEqual([500, 620, "Q619", "Q000", "Q498"]);
  });

  it("leave out what can be no code, and are none before the first check", async () => {
    const { id } = await checked(test, { file: salesFile(row("2026-06-08", "x".repeat(65), "P1"), row("2026-06-08", '"a\tb"', "P1"), row("2026-06-08", "S1", "P1")) });
    expect(await codesOf(id)).toEqual({ stores: [], storesTotal: 0, products: [], productsTotal: 0 });
    const stores = await loaded(test, { kind: "stores", file: "store,name,region\nS4,High Moor,moor" });
    expect((await codesOf(stores.id)).storesTotal).toBe(0);
  });

  it("of temperatures are listed too", async () => {
    const { id } = await checked(test, { kind: "temperatures", file: "week,region,store,temperature_c\n2026-06-01,,S73,14\n2026-06-01,moor,,14" });
    expect((await codesOf(id)).stores).toEqual([{ code: "S73", rows: 1, firstWeek: "2026-06-01", lastWeek: "2026-06-01" }]);
  });
});

describe("entering them", () => {
  it("puts them into the catalogue with an entry in the trail, and checks the file again", async () => {
    const first = await checked(test, { file: salesFile(row("2026-06-08", "S80", "P80"), row("2026-06-08", "S80", "2000000000190"), row("2026-06-08", "S1", "P1")) });
    expect(first.rows).toMatchObject({ usable: 1 });
    const answer = await enter(first.id, {
      stores: [{ code: "S80", name: "New Road", region: "moor", opened: "2026-06-01" }],
      products: [{ code: "P80", name: "Rye bar", category: "snacks", brand: "Larkfield" }, { code: "2000000000190", name: "Plum bar", category: "snacks" }],
    }).expect(202);
    expect(answer.headers.location).toBe(`/api/jobs/${answer.body.jobId}`);
    expect(await afterJob(test, answer)).toMatchObject({ state: "checked", rows: { read: 3, usable: 3, errors: 0 } });
    expect(await codesOf(first.id)).toEqual({ stores: [], storesTotal: 0, products: [], productsTotal: 0 });
    const { body: stores } = await read(test, "/api/stores").expect(200);
    expect(stores.items).toContainEqual(expect.objectContaining({ code: "S80", name: "New Road", region: "moor", opened: "2026-06-01", closed: null }));
    const { body: products } = await read(test, "/api/products").expect(200);
    expect(products.items).toContainEqual(expect.objectContaining({ code: "P80", name: "Rye bar", category: "snacks", brand: "Larkfield", gtin: null }));
    expect(products.items).toContainEqual(expect.objectContaining({ code: "2000000000190", gtin: "2000000000190" }));
    const { rows: trail } = await test.services.pool.query("select distinct subject_kind, subject_id, person_id from audit_entries where subject_id in ('S80', 'P80') order by 1");
    expect(trail).toEqual([
      { subject_kind: "product", subject_id: "P80", person_id: first.uploadedBy.id },
      { subject_kind: "store", subject_id: "S80", person_id: first.uploadedBy.id },
    ]);
  });

  it("leaves alone what somebody has entered meanwhile", async () => {
    const { id } = await checked(test, { file: salesFile(row("2026-06-08", "S81", "P1"), row("2026-06-08", "S1", "P1")) });
    await loaded(test, { kind: "stores", file: "store,name,region\nS81,Their name,coast" });
    await afterJob(test, await enter(id, { stores: [{ code: "S81", name: "My name", region: "moor" }] }).expect(202));
    const { body } = await read(test, "/api/stores").expect(200);
    expect(body.items).toContainEqual(expect.objectContaining({ code: "S81", name: "Their name", region: "coast" }));
  });

  it("is refused for what is loaded already", async () => {
    const { id } = await loaded(test, { file: salesFile(row("2026-06-08", "S82", "P1"), row("2026-06-08", "S1", "P1")) });
    const { body } = await enter(id, { stores: [{ code: "S82", name: "New Road", region: "moor" }] }).expect(409);
    expect(body.code).toBe("not-checkable");
  });

  it("is refused while the file is being checked, since that check would not know them", async () => {
    const { id } = await checked(test, { file: salesFile(row("2026-06-08", "S85", "P1"), row("2026-06-08", "S1", "P1")) });
    await test.services.pool.query("update extracts set state = 'checking' where id = $1", [id]);
    const { body } = await enter(id, { stores: [{ code: "S85", name: "New Road", region: "moor" }] }).expect(409);
    expect(body.code).toBe("being-checked");
    const { rows } = await test.services.pool.query("select 1 from stores where code = 'S85'");
    expect(rows).toEqual([]);
  });

  it("is refused for nothing, for a code twice, for one the file does not name, and without a name", async () => {
    const { id } = await checked(test, { file: salesFile(row("2026-06-08", "S83", "P1"), row("2026-06-08", "S1", "P1")) });
    const store = { code: "S83", name: "New Road", region: "moor" };
    const refusal = async (body: object) => {
      const answer = await enter(id, body).expect(422);
      return [answer.body.code, ...answer.body.errors.map(({ path }: { path: string }) => path)];
    };
    expect(await refusal({})).toEqual(["nothing-to-enter", "stores"]);
    expect(await refusal({ stores: [store, store] })).toEqual(["repeated-code", "stores.1.code"]);
    expect(await refusal({ stores: [store, { ...store, code: "S84" }] })).toEqual(["not-named", "stores.1.code"]);
    expect(await refusal({ stores: [{ ...store, name: " " }] })).toEqual(["invalid-request", "stores.0.name"]);
    expect((await codesOf(id)).storesTotal).toBe(1);
  });
});

describe("the routes", () => {
  it("are read by everyone signed in, and used by those who keep the catalogue", async () => {
    const { id } = await checked(test, { file: salesFile(row("2026-06-08", "S90", "P1"), row("2026-06-08", "S1", "P1")) });
    const path = `/api/extracts/${id}/unknown-codes`;
    await request(test.app).get(path).expect(401);
    await request(test.app).get(path).set("Authorization", planner).expect(200);
    await request(test.app).post(path).send({}).expect(401);
    const { body } = await request(test.app).post(path).set("Authorization", planner).send({}).expect(403);
    expect(body.code).toBe("not-allowed");
    await read(test, `/api/extracts/${randomUUID()}/unknown-codes`).expect(404);
    await enter(randomUUID(), { stores: [{ code: "S90", name: "New Road", region: "moor" }] }).expect(404);
  });
});
