import { randomUUID } from "node:crypto";
import Papa from "papaparse";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { withoutGuard } from "@shared/csv";
import type { CheckRule } from "@shared/contract/extracts";
import { checkedDirectly, loadCatalogueDirectly, read, salesFile, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { bearerOf } from "../support/people";

let test: ExtractsApp;
let planner: string;
let id: string;

const line = (store: string, units: string, product = "P1") => `2026-06-08,${store},${product},${units},1.79,1.79,,0,0,none`;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  planner = await bearerOf(test.app, test.services, ["planner"]);
  await loadCatalogueDirectly(test);
  ({ id } = await checkedDirectly(test, { name: "=week 23.csv.gz", file: salesFile(
    line("=1+1", "1"), line("+S", "1"), line("-S", "1"), line("@S", "1"), line('"say ""no"", please"', "1"), line("S1", "-1"), line("S1", "x", "'=P"),
  ) }));
});
afterAll(() => test.stop());

const csvOf = async (query = "", of = id) => {
  const { text, headers } = await read(test, `/api/extracts/${of}/issues.csv${query}`).expect(200);
  return { text, headers, rows: Papa.parse<string[]>(text.slice(1), { skipEmptyLines: true }).data };
};

describe("issues as CSV", () => {
  it("are the list, safe to open in a spreadsheet, with a byte order mark and lines that end as RFC 4180 has it", async () => {
    const { text, headers, rows } = await csvOf();
    expect(headers["content-type"]).toBe("text/csv; charset=utf-8");
    expect(headers["content-disposition"]).toBe('attachment; filename="=week 23 issues.csv"');
    expect(text.startsWith("\uFEFFline,column,value,severity,reason,remedy\r\n")).toBe(true);
    expect(text.replaceAll("\r\n", "")).not.toContain("\n");
    expect(rows.slice(1).map(([at, column, value]) => [at, column, value])).toEqual([
      ["2", "store", "'=1+1"], ["3", "store", "'+S"], ["4", "store", "'-S"], ["5", "store", "'@S"], ["6", "store", 'say "no", please'],
      ["7", "units", "'-1"], ["8", "product", "''=P"], ["8", "units", "x"],
    ]);
    const { body } = await read(test, `/api/extracts/${id}/issues`).expect(200);
    expect(rows.slice(1).map((cells) => cells.map(withoutGuard))).toEqual(body.items.map((issue: Record<string, unknown>) =>
      ["line", "column", "value", "severity", "reason", "remedy"].map((name) => String(issue[name]))));
  });

  it("are filtered by severity, rule and column, as the list is", async () => {
    for (const [query, lines] of [
      ["?severity=warning", ["7"]], ["?rule=unknown-product", ["8"]], ["?column=units", ["7", "8"]], ["?column=units&severity=error", ["8"]], ["?rule=none-such", []],
    ] as const) {
      expect((await csvOf(query)).rows.slice(1).map(([at]) => at), query).toEqual(lines);
      const { body } = await read(test, `/api/extracts/${id}/issues${query}`).expect(200);
      expect(body.items.map((issue: { line: number }) => String(issue.line)), query).toEqual(lines);
    }
  });

  it("come whole however many there are, and say at the end how many are not listed", { timeout: 60_000 }, async () => {
    const rows = Array.from({ length: 101_500 }, (_, at) => line("S9", String(at + 1)));
    const extract = await checkedDirectly(test, { file: salesFile(...rows, line("S1", "1")) });
    const { body } = await read(test, `/api/extracts/${extract.id}/issues?limit=1`).expect(200);
    expect(body.byRule[0]).toMatchObject({ rule: "unknown-store", count: 101_500, listed: 100_000 });
    const { rows: found } = await csvOf("", extract.id);
    const listed = found.slice(1, -1);
    expect(listed).toHaveLength(100_000);
    expect(new Set(listed.map(([at]) => at)).size).toBe(100_000);
    expect(found.at(-1)?.slice(0, 5)).toEqual(["", "", "", "error", "There is no store with this code: 1500 more, not listed"]);
  });

  it("are read by everyone signed in; a filter that cannot be is refused", async () => {
    const path = `/api/extracts/${id}/issues.csv`;
    await request(test.app).get(path).expect(401);
    await request(test.app).get(path).set("Authorization", planner).expect(200);
    expect((await read(test, `${path}?severity=bad`).expect(422)).body.errors[0].path).toBe("severity");
    await read(test, `/api/extracts/${randomUUID()}/issues.csv`).expect(404);
  });
});

describe("the rules that files are checked for", () => {
  it("are told in words to everyone signed in, those of one kind behind each other", async () => {
    await request(test.app).get("/api/check-rules").expect(401);
    const { body } = await request(test.app).get("/api/check-rules").set("Authorization", planner).expect(200);
    const rules: CheckRule[] = body.items;
    expect(new Set(rules.map(({ rule }) => rule)).size).toBe(rules.length);
    expect(rules).toContainEqual({
      rule: "unusual-price", severity: "warning", about: "What values say together",
      reason: "The price is less than a fifth or more than five times what is usual for the product",
      remedy: "Check the unit: a price for a case, in cents, or with a decimal sign lost. Nothing to do if it is right.",
    });
    const kinds = rules.map(({ about }) => about).filter((about, at, all) => about !== all[at - 1]);
    expect(new Set(kinds).size).toBe(kinds.length);
    for (const { rule, reason, remedy } of rules) {
      expect(rule).toMatch(/^[a-z]+(-[a-z]+)*$/);
      expect([/^[A-Z].*[^.]$/.test(reason), /^[A-Z].*\.$/.test(remedy)], rule).toEqual([true, true]);
    }
  });
});
