import { addTransposeTimes } from "../linalg/sparse-rows";
import type { SplineRows } from "../linalg/sparse-rows";
import type { LevelledSmoothBasis, ModelData } from "../types";
import { repeatPerLevel } from "./alike-rows";
import type { BasisKind } from "./basis-kind";
import { levelColumn, numberColumn } from "./columns";
import { knownPositions, learnLevels, splinesPerLevel } from "./levels";
import { outsideRange } from "./ranges";
import type { ScaledSmoothTerm } from "./scaled-smooth";
import { seenPerLevel } from "./seen-values";
import { defaultSmoothSize } from "./smooth";
import { gridLogSlopes, gridRows, learnGrid } from "./spline-grid";

const role = "smooth";
const byRole = "smooth's by";

/** A smooth per level of the column `by`, all on the knots of the whole column; each is centred over its level's rows. */
export const levelledSmooth: BasisKind<ScaledSmoothTerm, LevelledSmoothBasis> = {
  learn(term, id, data) {
    const learnt = learnGrid({ column: term.column, log: term.log, size: term.size ?? defaultSmoothSize, id, role, coded: true }, data);
    const { levels, index } = learnLevels(data, term.by, byRole);
    const repeated = learnt.rows.alike === undefined ? null : repeatPerLevel(learnt.rows.alike, index, levels.length);
    const rows = repeated ?? splinesPerLevel(learnt.rows, index, levels.length);
    const basis: LevelledSmoothBasis = { kind: "levelled-smooth", ...learnt.grid, by: term.by, levels, centring: levelMeans(rows, index, levels.length) };
    const seen = { ...learnt.seen, byLevel: seenPerLevel(numberColumn(data, term.column, role), index, levels.length, learnt.distinct) };
    return { basis, rows, seen, observedRange: learnt.observedRange, warnings: learnt.warnings };
  },
  rows: (basis, data) => perLevel(basis, gridRows(basis, data, role), data),
  logSlopeRows: (basis, data) => perLevel(basis, gridLogSlopes(basis, data, role), data),
  outside: (range, basis, data) => outsideRange(range, numberColumn(data, basis.column, role)),
  names: (basis, id) => basis.levels.flatMap((level) => Array.from({ length: basis.size }, (_, k) => `${id}[${level},${k + 1}]`)),
};

function perLevel(basis: LevelledSmoothBasis, rows: SplineRows, data: ModelData): SplineRows {
  const index = knownPositions({ column: basis.by, levels: basis.levels }, levelColumn(data, basis.by, byRole));
  return splinesPerLevel(rows, index, basis.levels.length);
}

/** Mean of each level's splines over that level's rows. */
function levelMeans(rows: SplineRows, index: Int32Array, count: number): Float64Array {
  const means = new Float64Array(rows.width);
  addTransposeTimes(rows, new Float64Array(index.length).fill(1), means, 0);
  const perLevelRows = new Float64Array(count);
  for (let row = 0; row < index.length; row++) perLevelRows[index[row]]++;
  const size = rows.width / count;
  return means.map((sum, column) => sum / perLevelRows[Math.floor(column / size)]);
}
