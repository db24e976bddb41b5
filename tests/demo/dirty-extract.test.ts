import { describe, expect, it } from "vitest";
import { detectLayout } from "@shared/layouts";
import { dirtyExtract, newStore, ownWordForDisplay } from "../../demo/dirty-extract";
import { generateDemo } from "../../demo/generate";

const demo = generateDemo();
const { name, bytes } = dirtyExtract(demo);
const lines = Buffer.from(bytes).toString("latin1").trimEnd().split("\r\n");
const rows = lines.slice(1).map((line) => line.split(";"));

describe("The dirty extract", () => {
  it("is the same, byte for byte, each time it is made", () => {
    expect(Buffer.from(dirtyExtract(generateDemo()).bytes).equals(Buffer.from(bytes))).toBe(true);
    expect(name).toBe("coast-tills.csv");
  });

  it("has the coast's next week, a store that nobody has entered, and four corrections of the week before", () => {
    const coast = demo.stores.filter(({ region }) => region === "Coast");
    const next = rows.filter(([week]) => week === "07/06/2026");
    expect(coast.every(({ store }) => next.some((row) => row[1] === store))).toBe(true);
    expect(demo.stores.some(({ store }) => store === newStore.code)).toBe(false);
    expect(next.filter((row) => row[1] === newStore.code)).toHaveLength(18);
    expect(rows.filter(([week]) => week === "31/05/2026")).toHaveLength(4);
    expect(new Set(rows.map(([week]) => week)).size).toBe(2);
  });

  it("has a field for every heading, and lines that are plainly wrong", () => {
    expect(rows.every((row) => row.length === lines[0].split(";").length)).toBe(true);
    expect(rows.filter((row) => row[3] === "a few")).toHaveLength(1);
    expect(rows.filter((row) => row[2] === "P1O1")).toHaveLength(1);
    expect(rows.filter((row) => row[4].startsWith("-"))).toHaveLength(1);
    expect(rows.length - new Set(rows.map((row) => row.join(";"))).size).toBe(1);
    expect(rows.some((row) => row[7] === ownWordForDisplay)).toBe(true);
  });

  it("is taken for what it is, but for some of its columns, which a person must put right", () => {
    const { layout } = detectLayout(bytes, "sales");
    expect(layout).toMatchObject({ encoding: "windows-1252", separator: ";", decimal: ",", dateOrder: "dmy", weekDay: "last" });
    expect(layout.theirColumns).toContain("Usual price \u20ac");
    const right = { units: "Sold", net_sales: "Takings", regular_price: "Usual price \u20ac", shelf_price: "Till price \u20ac" };
    const wrong = Object.entries(right).filter(([ours, name]) => JSON.stringify(layout.mapping[ours]) !== JSON.stringify({ from: "name", name }));
    expect(wrong.map(([ours]) => ours)).toEqual(expect.arrayContaining(["regular_price", "shelf_price"]));
  });
});
