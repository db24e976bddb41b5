import type { IndexRows } from "../linalg/sparse-rows";
import type { ModelData, RandomEffectBasis, RandomEffectTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { levelColumn, numberColumn } from "./columns";
import { learnLevels, levelPositions } from "./levels";
import { seenLevels } from "./seen-values";

const role = "random-effect";
const byRole = "random-effect's by";

/**
 * One column per group: a level, or a slope in `by` (the column's own values, not centred), as random effects (Robinson
 * 1991). A group never seen has a row of zeros: it is predicted as the average of the groups.
 */
export const randomEffect: BasisKind<RandomEffectTerm, RandomEffectBasis> = {
  learn(term, _id, data) {
    const { levels, index } = learnLevels(data, term.column, role);
    const basis: RandomEffectBasis = { kind: "random-effect", column: term.column, by: term.by ?? null, levels };
    return { basis, rows: rowsAt(basis, index, data), seen: seenLevels(levels, index), observedRange: null, warnings: [] };
  },
  rows: (basis, data) => rowsAt(basis, positionsIn(basis, data), data),
  logSlopeRows: () => null,
  outside: (_range, basis, data) => Uint8Array.from(positionsIn(basis, data), (position) => Number(position < 0)),
  names: (basis, id) => basis.levels.map((level) => `${id}[${level}]`),
};

const positionsIn = (basis: RandomEffectBasis, data: ModelData): Int32Array =>
  levelPositions(basis.levels, levelColumn(data, basis.column, role));

function rowsAt(basis: RandomEffectBasis, positions: Int32Array, data: ModelData): IndexRows {
  const width = basis.levels.length;
  const by = basis.by === null ? null : numberColumn(data, basis.by, byRole);
  if (!positions.includes(-1)) return { storage: "index", width, index: positions, values: by?.slice() ?? null };
  return {
    storage: "index",
    width,
    index: positions.map((position) => Math.max(position, 0)),
    values: Float64Array.from(positions, (position, row) => (position < 0 ? 0 : (by?.[row] ?? 1))),
  };
}
