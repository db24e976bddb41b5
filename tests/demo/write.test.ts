import { mkdtemp, readdir, readFile, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { gunzipSync } from "node:zlib";
import Papa from "papaparse";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { generateDemo } from "../../demo/generate";
import { demoFiles, writeDemo } from "../../demo/write";

const demo = generateDemo();
const files = demoFiles(demo);
const headings: Record<string, string> = {
  "stores.csv": "store,name,region,opened,closed",
  "products.csv": "product,name,gtin,brand,category,sold_by_weight,valid_from,unit_cost,regular_price,tax_rate",
  "listings.csv": "product,store,first_day,last_day",
  "funding.csv": "product,first_day,last_day,per_unit,lump_sum",
  "events.csv": "event,name,first_day,last_day,region",
  "temperatures.csv": "week,region,temperature_c",
  "sales.csv": "week,store,product,units,net_sales,regular_price,shelf_price,feature,display,mechanic",
};
let folder = "";

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "larkmoor-"));
});
afterAll(() => rm(folder, { recursive: true }));

describe("The demo's files", () => {
  it("have our headings, a row a line and nothing left over when read back", () => {
    expect(Object.keys(files)).toEqual(Object.keys(headings));
    const rowCounts = { "stores.csv": 24, "products.csv": demo.products.length, "listings.csv": 18 * 24, "funding.csv": demo.funding.length, "events.csv": demo.events.length };
    for (const [name, text] of Object.entries(files)) {
      const parsed = Papa.parse<string[]>(text, { skipEmptyLines: false });
      expect(parsed.errors).toEqual([]);
      expect(parsed.data[0].join(",")).toBe(headings[name]);
      expect(parsed.data.at(-1)).toEqual([""]);
      const wide = parsed.data.slice(0, -1).filter((row) => row.length !== parsed.data[0].length);
      expect(wide).toEqual([]);
      if (name in rowCounts) expect(parsed.data.length - 2).toBe(rowCounts[name as keyof typeof rowCounts]);
    }
  });

  it("keep units to the gram and prices to the cent", () => {
    const [, ...rows] = Papa.parse<string[]>(files["sales.csv"].trimEnd()).data;
    const wellWritten = /^\d+(\.\d{1,3})?,(\d+\.\d\d,){3}[01],[01],(none|price_cut)$/;
    expect(rows.filter((row) => !wellWritten.test(row.slice(3).join(",")))).toEqual([]);
  });

  it("are written into a folder that is made for them, sales gzipped when asked", async () => {
    const target = join(folder, "new", "extract");
    const paths = await writeDemo({ demo, folder: target, gzipSales: true });
    const written = await readdir(target);
    expect(written.sort()).toEqual(["events.csv", "funding.csv", "listings.csv", "products.csv", "sales.csv.gz", "stores.csv", "temperatures.csv"]);
    expect(paths).toContain(join(target, "sales.csv.gz"));
    const unzipped = gunzipSync(await readFile(join(target, "sales.csv.gz"))).toString("utf8");
    expect(unzipped).toBe(files["sales.csv"]);
  });
});
