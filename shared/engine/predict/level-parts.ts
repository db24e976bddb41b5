import { seenRows } from "../basis/seen-rows";
import { addTransposeTimes } from "../linalg/sparse-rows";
import type { FittedModel, FittedTerm } from "../types";
import type { DesignRows } from "./design-rows";

/**
 * What stands beside a centred curve to make it the predictor of average rows: the intercept and the other terms at their
 * means, as parts for `rowStandardErrors`. Centred terms have the mean zero, so of the others only factors, surfaces and
 * ungrouped levels count; a curve of one level stands at that level of its factor. Terms times a number stand at zero of it,
 * terms on eliminated groups at the chain's average.
 * Source: Marra & Wood (2012), Scand. J. Statist. 39, 53-74, section 3.
 *
 * @param at.count how many rows, all alike. at.group the level drawn, of a curve per level.
 * @returns none for a term that is not centred, whose band leaves nothing out. O(count x levels of factors).
 * @example rowStandardErrors(model, [...levelParts(model, term, { count: 100 }), { id: term.id, first: term.first, rows }], 100);
 */
export function levelParts(model: FittedModel, term: FittedTerm, at: { count: number; group?: string }): DesignRows["parts"] {
  const { count, group } = at;
  if (!isCentred(term)) return [];
  const parts: DesignRows["parts"] = [{ id: "intercept", first: 0, rows: { storage: "single", width: 1, values: new Float64Array(count).fill(1) } }];
  for (const other of model.terms) {
    const means = other.id === term.id ? null : meansOf(other, levelOf(term, other, group));
    if (means === null) continue;
    const values = new Float64Array(count * other.count);
    for (let row = 0; row < count; row++) values.set(means, row * other.count);
    parts.push({ id: other.id, first: other.first, rows: { storage: "dense", width: other.count, values } });
  }
  return parts;
}

const isCentred = ({ basis }: FittedTerm): boolean => basis.kind === "linear" || "centring" in basis;

/** The level of a factor that a curve per level belongs to. */
function levelOf({ basis }: FittedTerm, other: FittedTerm, group: string | undefined): string | undefined {
  return basis.kind === "levelled-smooth" && other.basis.kind === "factor" && other.basis.column === basis.by ? group : undefined;
}

/** Mean of each column over the fitted rows; null where all are zero. */
function meansOf(term: FittedTerm, level: string | undefined): Float64Array | null {
  const { basis, seen, layout } = term;
  const isMean = basis.kind === "factor" || basis.kind === "tensor-product" || (basis.kind === "random-effect" && basis.by === null);
  if (!isMean || layout.groupFirst !== null) return null;
  if (basis.kind === "factor" && level !== undefined) return Float64Array.from(basis.levels, (name) => Number(name === level));
  const means = new Float64Array(term.count);
  const rows = seen.counts.reduce((sum, count) => sum + count, 0);
  addTransposeTimes(seenRows(term).rows, seen.counts.map((count) => count / rows), means, 0);
  return means;
}
