import type { ColumnSource, Layout } from "@shared/contract/layouts";
import { defaultWords } from "@shared/layouts";

/** A layout of sales files whose columns are named as ours are given; by position where it has no header. */
export function aLayout({ columns = ["week", "store", "units"], ...changes }: Partial<Layout> & { columns?: string[] } = {}): Layout {
  const { hasHeader = true } = changes;
  const source = (name: string, position: number): ColumnSource => (hasHeader ? { from: "name", name } : { from: "position", position });
  return {
    kind: "sales", encoding: "utf-8", separator: ",", linesAbove: 0, hasHeader, theirColumns: columns.map((name) => (hasHeader ? name : "")),
    decimal: ".", thousands: "", dateOrder: "iso", weekDay: "first", missingMeans: "unknown", tax: "included",
    mapping: Object.fromEntries(columns.map((name, position) => [name, source(name, position)])), words: defaultWords,
    ...changes,
  };
}
