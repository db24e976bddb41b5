import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import type { ExtractChanges } from "@shared/contract/extracts";
import { loadExtract, withdrawExtract } from "../../server/features/extracts";
import { checkedDirectly, loadCatalogueDirectly, read, salesFile, startExtractsApp, storedSales, type ExtractsApp } from "../support/extracts";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());
beforeEach(async () => {
  await test.services.pool.query("truncate weekly_sales, weekly_sales_history, sales_confirmations, store_weeks");
  await test.services.pool.query("update extracts set state = 'withdrawn' where kind = 'sales'; update chain set second_look_share = 0.25");
});

const row = (store: string, units: number) => `2026-06-01,${store},P1,${units},${(units * 1.79).toFixed(2)},1.79,,0,0,none`;
const check = async (name: string, ...rows: string[]) => (await checkedDirectly(test, { name, file: salesFile(...rows) })).id;
const load = (extractId: string) => loadExtract(test.services, { extractId, seen: "everything" });
const changesOf = async (id: string): Promise<ExtractChanges> => (await read(test, `/api/extracts/${id}/changes`).expect(200)).body;
const units = async () => (await storedSales(test)).map(({ store, units: sold, file }) => `${store} ${sold} ${file}`);

describe("what a check found a load would change", () => {
  it("is taken by the load where nothing was loaded or withdrawn since", async () => {
    const id = await check("a.csv", row("S1", 10), row("S2", 20));
    // A mark that only the check's own answer has.
    await test.services.pool.query("update extracts set changes = jsonb_set(changes, '{totals,missing}', '77') where id = $1", [id]);
    expect(await load(id)).toEqual({ new: 2, changed: 0, same: 0, missing: 77 });
    expect(await units()).toEqual(["S1 10 a.csv", "S2 20 a.csv"]);
  });

  it("is worked out anew where another file was loaded since", async () => {
    const [first, second] = [await check("a.csv", row("S1", 10), row("S2", 20)), await check("b.csv", row("S1", 10), row("S2", 21), row("S3", 5))];
    expect((await changesOf(second)).totals).toEqual({ new: 3, changed: 0, same: 0, missing: 0 });
    await load(first);
    expect(await load(second)).toEqual({ new: 1, changed: 1, same: 1, missing: 0 });
    expect(await units()).toEqual(["S1 10 a.csv", "S2 21 b.csv", "S3 5 b.csv"]);
  });

  it("is worked out anew where a file was loaded and withdrawn since, or only withdrawn", async () => {
    const [first, second] = [await check("a.csv", row("S1", 10)), await check("b.csv", row("S1", 11))];
    await load(first);
    await withdrawExtract(test.services, { extractId: first });
    expect(await load(second)).toEqual({ new: 1, changed: 0, same: 0, missing: 0 });
    const third = await check("c.csv", row("S1", 12));
    expect((await changesOf(third)).totals).toMatchObject({ changed: 1 });
    await withdrawExtract(test.services, { extractId: second });
    expect(await load(third)).toEqual({ new: 1, changed: 0, same: 0, missing: 0 });
    expect(await units()).toEqual(["S1 12 c.csv"]);
  });

  it("is judged by the threshold that holds when it is loaded", async () => {
    await load(await check("a.csv", row("S1", 10)));
    const id = await check("b.csv", row("S1", 12));
    expect((await changesOf(id)).secondLook).toEqual([]);
    await test.services.pool.query("update chain set second_look_share = 0.1");
    await expect(loadExtract(test.services, { extractId: id })).rejects.toMatchObject({ code: "second-look-needed" });
    expect((await changesOf(id)).secondLook).toHaveLength(1);
    await test.services.pool.query("update chain set second_look_share = 0.25");
    await loadExtract(test.services, { extractId: id });
    expect((await changesOf(id)).secondLook).toEqual([]);
    expect(await units()).toEqual(["S1 12 b.csv"]);
  });

  it("is worked out anew where the rows that were ready had to be read again", async () => {
    const id = await check("a.csv", row("S1", 10), row("S2", 20));
    await test.services.pool.query("update extracts set changes = jsonb_set(changes, '{totals,missing}', '77') where id = $1", [id]);
    await test.services.pool.query(`truncate staging."rows_${id.replaceAll("-", "")}"`);
    expect(await load(id)).toEqual({ new: 2, changed: 0, same: 0, missing: 0 });
  });
});
