import { extractColumns } from "../contract/extract-columns";
import type { ExtractKind } from "../contract/extract-kinds";
import type { Layout, WordLists } from "../contract/layouts";
import { namesIn } from "./detected";

const noWords: WordLists = { yes: [], no: [], none: [], feature: [], display: [], feature_and_display: [], price_cut: [], multi_buy: [], coupon: [], other: [] };

/**
 * The layout of a file in our own form: UTF-8, commas, our names in its header, in any order and case.
 *
 * @param names the fields of its first line
 * @returns null where a needed column is missing, or one of ours stands twice.
 * @example ownLayout("stores", ["Name", "store", "region"])?.mapping.name // { from: "name", name: "Name" }
 */
export function ownLayout(kind: ExtractKind, names: readonly string[]): Layout | null {
  const theirColumns = namesIn(names);
  const mapping: Layout["mapping"] = {};
  for (const { name: column, needed } of extractColumns[kind]) {
    const [found, again] = theirColumns.filter((name) => name.toLowerCase() === column);
    if (again !== undefined || (needed && found === undefined)) return null;
    if (found !== undefined) mapping[column] = { from: "name", name: found };
  }
  return {
    kind, encoding: "utf-8", separator: ",", linesAbove: 0, hasHeader: true, theirColumns, decimal: ".", thousands: "", dateOrder: "iso",
    weekDay: "first", mapping, words: structuredClone(noWords), missingMeans: "unknown", tax: "included",
  };
}

/**
 * The needed columns of ours that a layout maps nothing to: without them a file cannot be used.
 *
 * @example missingColumns({ ...layout, kind: "stores", mapping: {} }) // ["store", "name", "region"]
 */
export function missingColumns({ kind, mapping }: Pick<Layout, "kind" | "mapping">): string[] {
  return extractColumns[kind].filter(({ name, needed }) => needed && !Object.hasOwn(mapping, name)).map(({ name }) => name);
}
