import type { SparseRows } from "../linalg/sparse-rows";
import type { FittedTerm, ModelData, SeenValues } from "../types";
import { perUnit } from "./per-unit";
import { basisRows } from "./term-basis";

/**
 * A term's rows at what it saw in the fit, each distinct value once: per level or group what that one saw, of a tensor
 * product the pairs; per unit of the number that multiplies a term.
 *
 * @returns the rows over the term's own coefficients, and how many.
 * @example const { rows, count } = seenRows(term); addRowsTimes(rows, model.coefficients, term.first, new Float64Array(count));
 */
export function seenRows(term: FittedTerm): { rows: SparseRows; count: number } {
  const { basis, seen } = term;
  const [column] = term.columns;
  if (basis.kind === "tensor-product") {
    return { rows: basisRows(basis, { [column]: seen.values, [term.columns[1]]: seen.second ?? [] }), count: seen.values.length };
  }
  if (basis.kind === "levelled-smooth" || basis.kind === "factor-smooth") {
    const data = perLevel(seen, basis.levels, { column, by: term.columns[1] });
    return { rows: basisRows(basis, data), count: data[column].length };
  }
  return { rows: basisRows(perUnit(basis), { [column]: seen.values }), count: seen.values.length };
}

function perLevel({ byLevel = [] }: SeenValues, levels: readonly string[], names: { column: string; by: string }): ModelData {
  return {
    [names.column]: byLevel.flatMap(({ values }) => Array.from(values)),
    [names.by]: byLevel.flatMap(({ values }, level) => Array.from(values, () => levels[level])),
  };
}
