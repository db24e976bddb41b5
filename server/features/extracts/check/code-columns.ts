import { gtinKey } from "../../catalogue";
import type { ReaderContext } from "../kinds/kind";
import type { Column } from "./row";

type Naming = Pick<ReaderContext, "codes" | "notes">;
const longestCode = 64;

/** Our key of the store in a column of a catalogue file; reported, and noted as unknown, where there is none. */
export function storeIdOf(column: Column, { codes, notes }: Naming): number | null {
  const code = column.text({ longest: longestCode, needed: true });
  if (code === null) return null;
  const id = codes.storeIds.get(code);
  if (id !== undefined) return id;
  notes.unknownStores.add(code, null);
  return column.report("unknown-store");
}

/** Our key of the product in a column of a catalogue file, by the chain's own code or else by GTIN. */
export function productIdOf(column: Column, { codes, notes }: Naming): number | null {
  const code = column.text({ longest: longestCode, needed: true });
  if (code === null) return null;
  const id = codes.productIds.get(code) ?? codes.productIdsByGtin.get(gtinKey(code));
  if (id === null) return column.report("ambiguous-product");
  if (id !== undefined) return id;
  notes.unknownProducts.add(code, null);
  return column.report("unknown-product");
}
