import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { ExtractIssue } from "@shared/contract/extracts";
import { ChainEntity } from "../../server/features/chain";
import { act, afterJob, checked, checkedDirectly, loadCatalogue, loaded, productsFile, read, salesFile, startExtractsApp, storesFile, type ExtractsApp } from "../support/extracts";
import { nastyCatalogue, nastyCells, nastyForms, type NastyFile } from "../support/nasty-files";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp();
  await loadCatalogue(test);
});
afterAll(() => test.stop());

async function issuesOf({ id }: { id: string }, query = "limit=1000"): Promise<ExtractIssue[]> {
  const { body } = await read(test, `/api/extracts/${id}/issues?${query}`).expect(200);
  return body.items;
}

async function expectOutcome({ kind, file, unusable, rows, issues }: NastyFile) {
  const extract = await checkedDirectly(test, { kind, file });
  expect({ state: extract.state, failure: extract.failure }).toEqual(unusable
    ? { state: "unusable", failure: { code: unusable[0], detail: expect.stringMatching(unusable[1]) } }
    : { state: "checked", failure: null });
  if (rows) expect([extract.rowsRead, extract.rowsUsable]).toEqual(rows);
  if (!issues) return;
  const found = await issuesOf(extract);
  expect(found.map(({ line, column, rule }) => `${line} ${column} ${rule}`).sort()).toEqual(issues);
  for (const { reason, remedy } of found) expect([reason, remedy].every((text) => text.length > 5)).toBe(true);
}

describe("a sales file with", () => {
  it.each(nastyForms.map((nasty) => [nasty.what, nasty] as const))("%s comes out as it must", (_, nasty) => expectOutcome(nasty));
  it.each(nastyCells.map((nasty) => [nasty.what, nasty] as const))("%s has that row listed and the others usable", (_, nasty) => expectOutcome(nasty));
});

describe("a file of the catalogue with", () => {
  it.each(nastyCatalogue.map((nasty) => [nasty.what, nasty] as const))("%s comes out as it must", (_, nasty) => expectOutcome(nasty));
});

describe("an issue", () => {
  it("says where, what, why and what to do", async () => {
    const extract = await checked(test, { file: salesFile("2026-06-03,S1,P1,1,1.79,1.79,,0,0,none", "2026-06-08,S1,P1,1,1.79,1.79,,0,0,none") });
    expect(await issuesOf(extract)).toEqual([{
      line: 2, column: "week", value: "2026-06-03", severity: "error", rule: "not-week-start",
      reason: "2026-06-03 is a Wednesday, but weeks begin on Monday: the week that holds it begins on 2026-06-01",
      remedy: "Give the first day of the week, by the chain's setting.",
    }]);
  });

  it("shows at most 200 characters of a value, and none that the database cannot keep", async () => {
    const extract = await checked(test, { file: salesFile(...Array.from({ length: 150 }, () => "2026-06-01,S1,P1,1,1.79,1.79,,0,0,none"), `2026-06-01,S1,\0${"🍎".repeat(200)},1,1.79,1.79,,0,0,none`) });
    const [issue] = await issuesOf(extract, "rule=unknown-product");
    expect(issue?.value).toHaveLength(200);
    expect(issue?.value.startsWith("\u2400🍎🍎")).toBe(true);
  });

  it("names both rows where two say the same or contradict each other", async () => {
    const row = "2026-06-01,S1,P1,1,1.79,1.79,,0,0,none";
    const extract = await checked(test, { file: salesFile(row, row, row.replace("S1", "S2"), row.replace("S1,P1,1", "S2,P1,2")) });
    expect((await issuesOf(extract)).map(({ line, value, reason }) => [line, value, reason])).toEqual([
      [3, "P1, S1, 2026-06-01", "The same row stands in line 2"],
      [4, "P1, S2, 2026-06-01", "Another row for the same differs from this one; the first such is in line 4"],
      [5, "P1, S2, 2026-06-01", "Another row for the same differs from this one; the first such is in line 4"],
    ]);
  });
});

describe("issues", () => {
  it("come in pages by line, filtered by severity and rule, with exact counts by rule", async () => {
    const bad = Array.from({ length: 7 }, (_, at) => `2026-06-01,S9,P1,${at},0,1.79,,0,0,none`);
    const extract = await checked(test, { file: salesFile(...bad, "2026-06-01,S1,P1,-1,-1.79,1.79,,0,0,none") });
    expect(extract.rows).toEqual({ read: 8, usable: 1, errors: 7, warnings: 7 });
    const path = `/api/extracts/${extract.id}/issues`;
    const { body: page } = await read(test, `${path}?severity=error&limit=5`).expect(200);
    expect(page.items.map(({ line }: ExtractIssue) => line)).toEqual([2, 3, 4, 5, 6]);
    expect(page.byRule).toEqual([
      expect.objectContaining({ rule: "unknown-store", severity: "error", count: 7 }),
      expect.objectContaining({ rule: "units-without-sales", severity: "warning", count: 6 }),
      expect.objectContaining({ rule: "net-returns", severity: "warning", count: 1 }),
    ]);
    const { body: rest } = await read(test, `${path}?severity=error&limit=5&cursor=${page.nextCursor}`).expect(200);
    expect([rest.items.map(({ line }: ExtractIssue) => line), rest.nextCursor]).toEqual([[7, 8], null]);
    expect(await issuesOf(extract, "rule=net-returns")).toEqual([expect.objectContaining({ line: 9, severity: "warning" })]);
    await read(test, `${path}?cursor=nonsense`).expect(422).expect(({ body }) => expect(body.code).toBe("invalid-cursor"));
  });

  it("are kept up to a bound and counted beyond it, without one rule hiding another", async () => {
    const rows = Array.from({ length: 101_500 }, (_, at) => `2026-06-01,S9,P1,${at % 7},1,1.79,,0,0,none`);
    const extract = await checked(test, { file: salesFile(...rows, "2026-06-01,S1,P9,1,1.79,1.79,,0,0,none", "2026-06-01,S1,P1,1,1.79,1.79,,0,0,none", "2026-06-01,S1,P1,1,1.79,1.79,,0,0,none") });
    expect(extract.rows).toMatchObject({ read: 101_503, usable: 1 });
    const { body } = await read(test, `/api/extracts/${extract.id}/issues`);
    const counts = Object.fromEntries(body.byRule.map(({ rule, count }: { rule: string; count: number }) => [rule, count]));
    expect(counts).toEqual({ "unknown-store": 101_500, "sales-without-units": 14_500, "unknown-product": 1, "repeated-row": 1 });
    const { rows: kept } = await test.services.pool.query("select rule, count(*)::int from extract_issues where extract_id = $1 group by 1 order by 1", [extract.id]);
    const total = kept.reduce((sum, { count }) => sum + count, 0);
    expect(total).toBeLessThanOrEqual(100_002);
    expect(kept).toContainEqual({ rule: "unknown-product", count: 1 });
    expect(kept).toContainEqual({ rule: "repeated-row", count: 1 });
  });
});

describe("a check", () => {
  it("can be done again once what was missing is there", async () => {
    const sales = await checked(test, { file: salesFile("2026-06-01,S21,P21,1,1.79,1.79,,0,0,none") });
    expect(sales).toMatchObject({ state: "unusable", may: { check: true, load: false } });
    await loaded(test, { kind: "stores", file: `${storesFile}\nS21,New Road,moor,,` });
    await loaded(test, { kind: "products", file: `${productsFile}\nP21,Rye bar,,,snacks,0,2025-01-01,0.80,1.79,0.21` });
    const again = await afterJob(test, await act(test, `/api/extracts/${sales.id}/check`).expect(202));
    expect(again).toMatchObject({ state: "checked", rows: { read: 1, usable: 1, errors: 0, warnings: 0 }, failure: null, may: { check: true, load: true } });
    expect(await issuesOf(again)).toEqual([]);
  });

  it("goes by the day on which the chain's weeks begin", async () => {
    const em = test.services.orm.em.fork();
    await em.nativeUpdate(ChainEntity, {}, { weekStart: 4 });
    const extract = await checked(test, { file: salesFile("2026-06-04,S1,P1,1,1.79,1.79,,0,0,none", "2026-06-01,S1,P1,1,1.79,1.79,,0,0,none") });
    await em.nativeUpdate(ChainEntity, {}, { weekStart: 1 });
    expect(extract).toMatchObject({ state: "checked", firstWeek: "2026-06-04", lastWeek: "2026-06-04", rows: { read: 2, usable: 1 } });
  });

  it("tells in its job how many rows it has read", async () => {
    const extract = await checked(test, { file: salesFile("2026-06-01,S1,P1,1,1.79,1.79,,0,0,none") });
    const { body: job } = await read(test, `/api/jobs/${extract.jobId}`).expect(200);
    expect(job).toMatchObject({ state: "succeeded", progress: { done: extract.sizeBytes, total: extract.sizeBytes, message: "Rows read: 1. Comparing them" }, subject: `/api/extracts/${extract.id}` });
  });
});
