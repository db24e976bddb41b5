import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { productSchema } from "@shared/contract/catalogue";
import { listCategories, listTerms } from "@shared/contract/catalogue-products";
import { change, historyOf } from "../support/catalogue";
import { loadCatalogueDirectly, read, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { signedInAs } from "../support/people";
import { expectProblem } from "../support/problems";

let test: ExtractsApp;
let planner: Awaited<ReturnType<typeof signedInAs>>;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  planner = await signedInAs(test.app, test.services, ["planner"]);
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());

const bar = { code: "N1", name: "Rye bar", gtin: "2000000000022", brand: "Larkfield", category: "snacks", soldByWeight: false };
let made = 0;

/** Enters a product under a code of its own. */
async function entered(part: object = {}) {
  const code = `N${(made += 1)}`;
  const { body } = await change(test, "post", "/api/products", { ...bar, code, ...part }).expect(201);
  return productSchema.parse(body);
}

const termsOf = async (code: string) => listTerms.response!.parse((await read(test, `/api/products/${code}/terms`).expect(200)).body).items;

describe("entering a product", () => {
  it("puts it in the list, with terms from the beginning", async () => {
    const product = await entered({ terms: { unitCost: 0.7, regularPrice: 1.59, taxRate: 0.09 } });
    expect(product).toMatchObject({ name: "Rye bar", categoryName: "snacks", unitCost: 0.7, regularPrice: 1.59, taxRate: 0.09, replaces: null });
    expect(await termsOf(product.code)).toMatchObject([{ validFrom: "1970-01-01", unitCost: 0.7, regularPrice: 1.59, taxRate: 0.09 }]);
    const { body } = await read(test, "/api/products").expect(200);
    expect(body.items).toContainEqual(product);
  });

  it("enters a category that is new with it", async () => {
    await entered({ category: "bakery" });
    const { body } = await read(test, "/api/categories").expect(200);
    expect(listCategories.response!.parse(body).items).toContainEqual({ code: "bakery", name: "bakery", products: 1, version: expect.any(String) });
    expect(await historyOf(test, "kind=category&code=bakery")).toMatchObject([{ change: "added", after: { name: "bakery" } }]);
  });

  it.each([
    ["a GTIN whose check digit is wrong", { gtin: "2000000000023" }, 422, "gtin", "This is no GTIN: it has 8, 12, 13 or 14 digits, the last of which is a check digit."],
    ["a ratio without the product replaced", { replacesSizeRatio: 2 }, 422, "replacesSizeRatio", "Give both the product replaced and the size ratio, or neither."],
    ["a product replaced that is not there", { replaces: "X9", replacesSizeRatio: 1 }, 422, "replaces", "There is no product with the code X9."],
    ["a negative cost", { terms: { unitCost: -1 } }, 422, "terms.unitCost", "An amount is not negative."],
    ["a price of nothing", { terms: { regularPrice: 0 } }, 422, "terms.regularPrice", "A price is above 0; leave it empty where it is not known."],
    ["a cost with five decimals", { terms: { unitCost: 0.12345 } }, 422, "terms.unitCost", "Amounts have at most 4 decimals."],
    ["a tax rate in per cent", { terms: { taxRate: 21 } }, 422, "terms.taxRate", "A tax rate is between 0 and 1: 0.21 for 21 %."],
    ["a code that is taken", { code: "P1" }, 409, "code", "There is a product with the code P1 already."],
  ])("refuses %s", async (_what, part, status, path, message) => {
    const response = await change(test, "post", "/api/products", { ...bar, code: "X1", ...part });
    expect({ status: response.status, errors: response.body.errors }).toEqual({ status, errors: [{ path, message }] });
    expectProblem(await read(test, "/api/products/X1/terms"), 404, "not-found");
  });

  it("is for people who may write the catalogue", async () => {
    for (const [method, path] of [["post", "/api/products"], ["put", "/api/products/P1"], ["delete", "/api/products/P1"],
      ["put", "/api/products/P1/terms/2026-01-01"], ["delete", "/api/products/P1/terms/2026-01-01"], ["put", "/api/categories/snacks"]] as const) {
      expectProblem(await request(test.app)[method](path).send(bar), 401, "not-signed-in");
      expectProblem(await planner[method](path).send(bar), 403, "not-allowed");
    }
    expectProblem(await request(test.app).get("/api/categories"), 401, "not-signed-in");
    expectProblem(await request(test.app).get("/api/products/P1/terms"), 401, "not-signed-in");
    await planner.get("/api/categories").expect(200);
  });
});

describe("changing a product", () => {
  it("keeps which product it replaces, and at what ratio of sizes", async () => {
    const [old, fresh] = [await entered(), await entered()];
    const body = { ...bar, replaces: old.code, replacesSizeRatio: 0.75 };
    const response = await change(test, "put", `/api/products/${fresh.code}`, body, { "If-Match": `"${fresh.version}"` }).expect(200);
    expect(response.body).toMatchObject({ replaces: old.code, replacesSizeRatio: 0.75 });
    const [last] = await historyOf(test, `kind=product&code=${fresh.code}`);
    expect(last).toMatchObject({ what: "product", change: "changed", before: { replaces: null }, after: { replaces: old.code, replacesSizeRatio: 0.75 } });
  });

  it("refuses a product that replaces itself, directly or by others", async () => {
    const [first, second] = [await entered(), await entered()];
    const replacing = (code: string) => ({ ...bar, replaces: code, replacesSizeRatio: 1 });
    const itself = await change(test, "put", `/api/products/${first.code}`, replacing(first.code));
    expect(itself.body.errors).toEqual([{ path: "replaces", message: "A product cannot replace itself." }]);
    await change(test, "put", `/api/products/${second.code}`, replacing(first.code)).expect(200);
    const inTurn = await change(test, "put", `/api/products/${first.code}`, replacing(second.code));
    expectProblem(inTurn, 422, "replaces-in-turn");
    expect(inTurn.body.errors).toEqual([{ path: "replaces", message: `${second.code} replaces ${first.code} itself, directly or by others.` }]);
  });

  it("is refused over a change that its author has not seen, and where there is no such product", async () => {
    const product = await entered();
    await change(test, "put", `/api/products/${product.code}`, { ...bar, name: "Rye bar, large" }).expect(200);
    const late = await change(test, "put", `/api/products/${product.code}`, bar, { "If-Match": `"${product.version}"` });
    expectProblem(late, 412, "changed-meanwhile");
    expect(late.body.detail).toContain(`Test Person changed product ${product.code} at`);
    expectProblem(await change(test, "put", "/api/products/X9", bar), 404, "not-found");
  });
});

describe("removing a product", () => {
  it("takes away one that nothing refers to, with its terms", async () => {
    const { code } = await entered();
    await change(test, "delete", `/api/products/${code}`).expect(204);
    expectProblem(await read(test, `/api/products/${code}/terms`), 404, "not-found");
    expectProblem(await change(test, "delete", `/api/products/${code}`), 404, "not-found");
  });

  it("is refused where a listing, funding or another product names it", async () => {
    const [product, later] = [await entered(), await entered()];
    const refusal = async (says: string) => {
      const response = await change(test, "delete", `/api/products/${product.code}`);
      expectProblem(response, 409, "in-use");
      expect(response.body.detail).toBe(`${product.code} cannot be removed: ${says}.`);
    };
    await change(test, "put", `/api/products/${later.code}`, { ...bar, replaces: product.code, replacesSizeRatio: 1 }).expect(200);
    await refusal("another product replaces it");
    await change(test, "post", "/api/funding", { product: product.code, firstDay: "2026-06-01", lastDay: "2026-06-14", perUnit: 0.1 }).expect(201);
    await refusal("it has funding");
    await change(test, "post", "/api/listings", { product: product.code, stores: ["S1"], firstDay: "2026-01-05" }).expect(201);
    await refusal("it is listed in stores");
  });
});

describe("a product's terms", () => {
  it("hold from a day on until the next, and are changed and removed one by one", async () => {
    const { code } = await entered({ terms: { unitCost: 0.5, regularPrice: 1.5, taxRate: 0.2 } });
    const first = await change(test, "put", `/api/products/${code}/terms/2026-06-01`, { unitCost: 0.6, regularPrice: 1.6, taxRate: 0.2 }).expect(200);
    expect(first.body).toEqual({ validFrom: "2026-06-01", unitCost: 0.6, regularPrice: 1.6, taxRate: 0.2, version: expect.any(String) });
    const on = async (day: string) => (await read(test, `/api/products?on=${day}`)).body.items.find((item: { code: string }) => item.code === code).regularPrice;
    expect([await on("2026-05-31"), await on("2026-06-01")]).toEqual([1.5, 1.6]);
    await change(test, "put", `/api/products/${code}/terms/2026-06-01`, { unitCost: 0.6, regularPrice: 1.7, taxRate: 0.2 }, { "If-Match": `"${first.body.version}"` }).expect(200);
    await change(test, "delete", `/api/products/${code}/terms/2026-06-01`).expect(204);
    expect((await termsOf(code)).map(({ validFrom }) => validFrom)).toEqual(["1970-01-01"]);
    const history = (await historyOf(test, `kind=product&code=${code}`)).filter(({ what }) => what === "terms");
    expect(history.map((entry) => [entry.change, entry.before?.regularPrice, entry.after?.regularPrice])).toEqual([
      ["removed", 1.7, undefined], ["changed", 1.6, 1.7], ["added", undefined, 1.6], ["added", undefined, 1.5],
    ]);
  });

  it("are not entered over others by who thinks the day is free, nor changed by who has seen others", async () => {
    const terms = { unitCost: 0.6, regularPrice: 1.6, taxRate: 0.2 };
    const { code } = await entered();
    const path = `/api/products/${code}/terms/2026-06-01`;
    const { body } = await change(test, "put", path, terms, { "If-None-Match": "*" }).expect(200);
    const again = await change(test, "put", path, { ...terms, regularPrice: 2 }, { "If-None-Match": "*" });
    expectProblem(again, 412, "changed-meanwhile");
    expect(again.body.detail).toMatch(new RegExp(`^Test Person entered the terms of ${code} from 2026-06-01 at 20.*\\. Nothing of yours was stored: read it again, then repeat your change\\.$`));
    await change(test, "put", path, { ...terms, regularPrice: 3 }).expect(200);
    expectProblem(await change(test, "put", path, terms, { "If-Match": `"${body.version}"` }), 412, "changed-meanwhile");
    await change(test, "delete", path).expect(204);
    const gone = await change(test, "put", path, terms, { "If-Match": `"${body.version}"` });
    expectProblem(gone, 412, "changed-meanwhile");
    expect(gone.body.detail).toBe(`Someone removed the terms of ${code} from 2026-06-01 meanwhile. Nothing of yours was stored.`);
  });

  it("are never all removed, and a day that has none answers 404", async () => {
    const { code } = await entered();
    const response = await change(test, "delete", `/api/products/${code}/terms/1970-01-01`);
    expectProblem(response, 409, "only-terms");
    expect(response.body.detail).toBe(`These are the only terms of ${code}. Change them, or enter others first.`);
    expectProblem(await change(test, "delete", `/api/products/${code}/terms/2026-06-02`), 404, "not-found");
    expectProblem(await change(test, "put", `/api/products/${code}/terms/tomorrow`, {}), 404, "not-found");
    const wrong = await change(test, "put", `/api/products/${code}/terms/2026-06-02`, { taxRate: 2 });
    expect(wrong.body.errors).toEqual([{ path: "taxRate", message: "A tax rate is between 0 and 1: 0.21 for 21 %." }]);
  });
});

describe("a category", () => {
  it("gets a name, and says who gave it", async () => {
    const { body } = await change(test, "put", "/api/categories/snacks", { name: "Snacks and bars" }).expect(200);
    expect(body).toMatchObject({ code: "snacks", name: "Snacks and bars" });
    const [last] = await historyOf(test, "kind=category&code=snacks");
    expect(last).toMatchObject({ change: "changed", before: { name: "snacks" }, after: { name: "Snacks and bars" } });
    expectProblem(await change(test, "put", "/api/categories/snacks", { name: "" }), 422, "invalid-request");
    expectProblem(await change(test, "put", "/api/categories/snacks", { name: "Bars" }, { "If-Match": '"an older one"' }), 412, "changed-meanwhile");
  });
});
