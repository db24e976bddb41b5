import { layoutSchema, type ColumnSource } from "@shared/contract/layouts";
import { detectLayout } from "@shared/layouts";
import { describe, expect, it } from "vitest";
import { sampleHeads } from "./sample-heads";

const usual = {
  encoding: "utf-8", separator: ",", linesAbove: 0, hasHeader: true, decimal: ".", thousands: "", dateOrder: "iso", weekDay: "first", tax: "included", missingMeans: "unknown",
};

const placeOf = (source: ColumnSource) => (source.from === "name" ? source.name : source.from === "position" ? source.position : source.value);

describe("a layout is detected from a head with", () => {
  it.each(sampleHeads)("$title", ({ kind = "sales", head, layout: expected, mapping, warnings = [] }) => {
    const { layout, columns, warnings: found } = detectLayout(head, kind);
    const { theirColumns, words, mapping: proposed, ...format } = layout;
    expect(format).toEqual({ ...usual, kind, ...expected });
    expect(Object.fromEntries(Object.entries(proposed).map(([column, source]) => [column, placeOf(source)]))).toEqual(mapping);
    expect(found.map(({ code }) => code).sort()).toEqual([...warnings].sort());
    expect(columns).toHaveLength(theirColumns.length);
    expect(layoutSchema.parse(layout)).toEqual({ ...layout, words });
  });
});

it("has at least forty heads, each with a title of its own", () => {
  expect(new Set(sampleHeads.map(({ title }) => title)).size).toBe(sampleHeads.length);
  expect(sampleHeads.length).toBeGreaterThanOrEqual(40);
});
