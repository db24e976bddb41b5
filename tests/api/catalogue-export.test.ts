import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import { change, loadLines } from "../support/catalogue";
import { checkedDirectly, loadCatalogueDirectly, read, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { signedInAs } from "../support/people";
import { expectProblem } from "../support/problems";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
  await change(test, "post", "/api/stores", { code: "-S9", name: "=1+1", region: "@moor", opened: null }).expect(201);
  await change(test, "post", "/api/stores", { code: "S8", name: "'-guarded, \"quoted\"", region: "Küste", closed: "2026-05-31" }).expect(201);
  await change(test, "post", "/api/products", { code: "+P9", name: "-20 % pack", brand: "@home", category: "=cat" }).expect(201);
  await change(test, "put", "/api/products/P1/terms/2026-06-01", { unitCost: 0.8765, regularPrice: 1.99, taxRate: 0.055 }).expect(200);
  await change(test, "post", "/api/listings", { product: "+P9", stores: ["-S9", "S1"], firstDay: "2026-01-05", lastDay: "2026-03-01" }).expect(201);
  await change(test, "post", "/api/listings", { product: "P1", stores: ["S1"], firstDay: "2026-01-05" }).expect(201);
  await change(test, "post", "/api/funding", { product: "+P9", firstDay: "2026-06-01", lastDay: "2026-06-14", perUnit: 0.1234, lumpSum: 0 }).expect(201);
  await change(test, "post", "/api/events", { code: "=fair", name: "+Fair", firstDay: "2026-06-05", lastDay: "2026-06-07", region: "@moor" }).expect(201);
  await change(test, "post", "/api/events", { code: "easter", name: "Easter", firstDay: "2026-04-03", lastDay: "2026-04-06" }).expect(201);
  await loadLines(test, "temperatures", "week,region,store,temperature_c", "2026-06-01,coast,,-2.25", "2026-06-01,,S1,14.123456789", "2026-06-08,@moor,,9", "2026-06-08,,-S9,8");
});
afterAll(() => test.stop());

const kinds: Exclude<ExtractKind, "sales">[] = ["stores", "products", "listings", "funding", "events", "temperatures"];
const exported = async (kind: string) => (await read(test, `/api/${kind}.csv`).expect(200)).text;

describe("an exported file", () => {
  it.each(kinds)("of %s, uploaded again, holds nothing that is not there already", async (kind) => {
    const file = await exported(kind);
    const { id, state, rowsRead, rowsUsable } = await checkedDirectly(test, { kind, file });
    expect({ state, rowsRead }).toEqual({ state: "checked", rowsRead: file.trimEnd().split("\r\n").length - 1 });
    expect(rowsUsable).toBe(rowsRead);
    const { body } = await read(test, `/api/extracts/${id}/changes`).expect(200);
    expect(body.totals).toEqual({ new: 0, changed: 0, same: rowsRead, missing: 0 });
  });

  it.each(kinds)("of %s has no cell that a spreadsheet would run", async (kind) => {
    const cells = (await exported(kind)).split("\r\n").slice(1).flatMap((line) => line.split(","));
    expect(cells.filter((cell) => /^"?[=+@\t\r]/.test(cell) || /^"?-(?!\d)/.test(cell))).toEqual([]);
  });

  it("is UTF-8 with its mark, a header of all our columns, and numbers as numbers", async () => {
    const response = await read(test, "/api/temperatures.csv").expect(200);
    expect(response.headers["content-type"]).toBe("text/csv; charset=utf-8");
    expect(response.headers["content-disposition"]).toBe("attachment; filename=temperatures.csv");
    expect(response.text).toBe("\uFEFFweek,region,store,temperature_c\r\n2026-06-01,coast,,-2.25\r\n2026-06-01,,S1,14.123456789\r\n2026-06-08,'@moor,,9\r\n2026-06-08,,'-S9,8\r\n");
    expect(await exported("stores")).toContain("S8,\"''-guarded, \"\"quoted\"\"\",Küste,,2026-05-31\r\n");
  });

  it("is for everyone signed in", async () => {
    const planner = await signedInAs(test.app, test.services, ["planner"]);
    const nobody = await signedInAs(test.app, test.services, []);
    for (const kind of kinds) {
      expectProblem(await request(test.app).get(`/api/${kind}.csv`), 401, "not-signed-in");
      expectProblem(await nobody.get(`/api/${kind}.csv`), 403, "not-allowed");
      await planner.get(`/api/${kind}.csv`).expect(200);
    }
  });
});
