import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { listCatalogueHistory } from "@shared/contract/catalogue-history";
import { enterProducts, enterStores } from "../../server/features/catalogue";
import { loadExtract } from "../../server/features/extracts";
import { change, historyOf } from "../support/catalogue";
import { checkedDirectly, loadCatalogueDirectly, read, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { signedInAs } from "../support/people";
import { expectProblem } from "../support/problems";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());

const header = "product,name,category,unit_cost,regular_price";
const product = (number: number, price: number) => `F${number},Product ${number},snacks,0.5,${price}`;
const numbers = Array.from({ length: 200 }, (_, index) => index);

describe("a file's changes", () => {
  it("leave a trace for each row that changed, and none for the others", async () => {
    const first = await checkedDirectly(test, { kind: "products", file: [header, ...numbers.map((number) => product(number, 1))].join("\n") });
    await loadExtract(test.services, { extractId: first.id });
    const second = await checkedDirectly(test, { kind: "products", name: "prices.csv", file: [header, ...numbers.map((number) => product(number, number < 150 ? 2 : 1))].join("\n") });
    await loadExtract(test.services, { extractId: second.id });
    const { rows } = await test.services.pool.query(
      "select action, count(*)::int as count from audit_entries where subject_id like 'F%' group by action, detail -> 'file' ->> 'id' order by action, count",
    );
    expect(rows).toEqual([{ action: "product.added", count: 200 }, { action: "terms.added", count: 200 }, { action: "terms.changed", count: 150 }]);
    expect((await historyOf(test, "kind=product&code=F7"))[0]).toMatchObject({
      what: "terms", change: "changed", code: "F7", file: { id: second.id, name: "prices.csv" }, person: { id: test.dataAdminId },
      before: { validFrom: "1970-01-01", unitCost: 0.5, regularPrice: 1, taxRate: 0 }, after: { validFrom: "1970-01-01", unitCost: 0.5, regularPrice: 2, taxRate: 0 },
    });
  });

  it("say the same as a form's, in the same words", async () => {
    const keysOf = async (query: string) => {
      const [entry] = await historyOf(test, query);
      return Object.keys(entry?.after ?? {}).sort();
    };
    await change(test, "post", "/api/stores", { code: "K1", name: "Kay", region: "coast" }).expect(201);
    expect(await keysOf("kind=store&code=K1")).toEqual(await keysOf("kind=store&code=S1"));
    await change(test, "post", "/api/products", { code: "K1", name: "Kay", category: "snacks" }).expect(201);
    for (const what of ["product", "terms"]) {
      const [byForm, byFile] = [await historyOf(test, "kind=product&code=K1"), await historyOf(test, "kind=product&code=F1")]
        .map((entries) => Object.keys(entries.find((entry) => entry.what === what)?.after ?? {}).sort());
      expect(byForm).toEqual(byFile);
    }
  });
});

describe("the history", () => {
  it("pages from the newest on, of one code or of a kind", async () => {
    const seen: number[] = [];
    let cursor: string | null = null;
    do {
      const { body } = await read(test, `/api/catalogue-history?kind=product&limit=150${cursor === null ? "" : `&cursor=${cursor}`}`).expect(200);
      const page = listCatalogueHistory.response!.parse(body);
      seen.push(...page.items.map(({ id }) => id));
      cursor = page.nextCursor;
    } while (cursor !== null);
    const { rows } = await test.services.pool.query("select count(*)::int as count from audit_entries where subject_kind = 'product'");
    expect(seen).toHaveLength(rows[0].count);
    expect(seen).toEqual([...new Set(seen)].sort((one, other) => other - one));
    expect(await historyOf(test, "kind=store&code=nobody")).toEqual([]);
  });

  it("is for everyone signed in, and needs a kind", async () => {
    const planner = await signedInAs(test.app, test.services, ["planner"]);
    await planner.get("/api/catalogue-history?kind=store").expect(200);
    expectProblem(await request(test.app).get("/api/catalogue-history?kind=store"), 401, "not-signed-in");
    expectProblem(await planner.get("/api/catalogue-history"), 422, "invalid-request");
    expectProblem(await planner.get("/api/catalogue-history?kind=person"), 422, "invalid-request");
    expectProblem(await planner.get("/api/catalogue-history?kind=store&cursor=x"), 422, "invalid-cursor");
    const nobody = await signedInAs(test.app, test.services, []);
    expectProblem(await nobody.get("/api/catalogue-history?kind=store"), 403, "not-allowed");
  });
});

describe("entering codes that a file names", () => {
  const by = () => ({ personId: test.dataAdminId, file: { id: "a file", name: "week.csv" } });

  it("adds those that are not there, with a trace each, and leaves the others alone", async () => {
    const entered = await test.services.orm.em.fork().transactional(async (em) => [
      await enterStores(em, { stores: [{ code: "E1", name: "East", region: "coast", opened: "2026-01-05" }, { code: "S1", name: "Other", region: "x", opened: null }], by: by() }),
      await enterProducts(em, { products: [{ code: "2000000000039", name: "Nut bar", category: "nuts", brand: null }, { code: "P1", name: "Other", category: "x", brand: null }], by: by() }),
      await enterProducts(em, { products: [], by: by() }),
    ]);
    expect(entered).toEqual([1, 1, 0]);
    expect((await historyOf(test, "kind=store&code=E1"))[0]).toMatchObject({ change: "added", file: { name: "week.csv" }, after: { name: "East", region: "coast", opened: "2026-01-05", closed: null } });
    const { body } = await read(test, "/api/products");
    expect(body.items.find(({ code }: { code: string }) => code === "2000000000039")).toMatchObject({ name: "Nut bar", gtin: "2000000000039", category: "nuts", regularPrice: null });
    expect(body.items.find(({ code }: { code: string }) => code === "P1")).toMatchObject({ name: "Oat bar" });
  });
});
