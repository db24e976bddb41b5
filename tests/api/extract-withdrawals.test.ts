import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { loadExtract, withdrawExtract } from "../../server/features/extracts";
import { seededUniform } from "../engine/support/generator";
import { checkedDirectly, loadCatalogueDirectly, salesFile, startExtractsApp, storedSales, type ExtractsApp } from "../support/extracts";
import { ModelledSales, type SaidRow } from "../support/modelled-sales";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());
beforeEach(async () => {
  await test.services.pool.query("truncate weekly_sales, weekly_sales_history, sales_confirmations");
});

const weeks = ["2026-05-18", "2026-05-25", "2026-06-01"];
const stores = ["S1", "S2", "S4"];
const regionOf = (store: string) => (store === "S4" ? "moor" : "coast");

/** A file of some of the stores' weeks; few values, so that files often say the same. */
function drawFile(uniform: () => number): SaidRow[] {
  const cells = weeks.flatMap((week) => stores.map((store) => ({ week, store })));
  const chosen = cells.filter(() => uniform() < 0.35);
  return (chosen.length > 0 ? chosen : cells.slice(0, 1)).map((cell) => {
    const units = Math.floor(uniform() * 3);
    return { ...cell, units, netSales: units * (uniform() < 0.5 ? 1.5 : 1.75) };
  });
}

const lineOf = ({ week, store, units, netSales }: SaidRow) => `${week},${store},P1,${units},${netSales.toFixed(2)},1.99,,0,0,none`;
const table = async () => (await storedSales(test)).map(({ week, store, units, file, price, source }) => `${week} ${store} ${units} ${file} ${price} ${source}`).sort();

async function withdraw(extractId: string): Promise<string> {
  return withdrawExtract(test.services, { extractId }).then(() => "withdrawn", (error: { code: string }) => error.code);
}

describe("any sequence of loads and withdrawals", () => {
  it.each([1, 2, 3])("leaves the sales as rules on a plain table do, after each step (draws of seed %i)", { timeout: 180_000 }, async (seed) => {
    const uniform = seededUniform(seed);
    const model = new ModelledSales();
    const ids = new Map<string, string>();
    const done = { loads: 0, withdrawn: 0, refused: 0 };
    for (let step = 0; step < 24; step++) {
      const { loaded } = model;
      if (loaded.length === 0 || uniform() < 0.55) {
        const [name, rows] = [`${String(step).padStart(2, "0")}.csv`, drawFile(uniform)];
        const { id } = await checkedDirectly(test, { name, file: salesFile(...rows.map(lineOf)) });
        await loadExtract(test.services, { extractId: id, seen: "everything" });
        model.load(name, rows);
        ids.set(name, id);
        done.loads++;
      } else {
        const name = loaded[Math.floor(uniform() * loaded.length)] ?? "";
        const isTouched = model.isTouchedLater(name);
        expect(await withdraw(ids.get(name) ?? ""), `${name} in step ${step}`).toBe(isTouched ? "touched-later" : "withdrawn");
        if (!isTouched) model.withdraw(name);
        done[isTouched ? "refused" : "withdrawn"]++;
      }
      expect(await table(), `after step ${step}`).toEqual(model.table({ regionOf, regularPrice: 1.99 }));
    }
    // Each of the three has happened, or the draws would show nothing.
    for (const times of Object.values(done)) expect(times).toBeGreaterThan(0);
    for (const name of model.loaded.reverse()) expect(await withdraw(ids.get(name) ?? "")).toBe("withdrawn");
    expect(await table()).toEqual([]);
    const { rows } = await test.services.pool.query("select (select count(*) from weekly_sales_history)::int as history, (select count(*) from sales_confirmations)::int as confirmations");
    expect(rows).toEqual([{ history: 0, confirmations: 0 }]);
  });
});
