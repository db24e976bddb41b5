import { EngineError } from "../errors";
import type { FactorBasis, FactorTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { levelColumn, quoted } from "./columns";
import { seenLevels } from "./seen-values";

const role = "factor";

/**
 * One indicator column per level, in sorted order (numbers by size). The reference level keeps its column, with a
 * coefficient that stays zero, so that a row's level is its column's index.
 */
export const factor: BasisKind<FactorTerm, FactorBasis> = {
  learn(term, _id, data) {
    const perRow = levelColumn(data, term.column, role);
    const levels = [...new Set(perRow)].sort(byNumberThenText);
    const reference = term.reference ?? levels[0];
    if (!levels.includes(reference)) {
      throw new EngineError(
        "level-unknown",
        `Reference level "${reference}" of factor "${term.column}" is not among its levels ${quoted(levels)}.`,
      );
    }
    const basis: FactorBasis = { kind: "factor", column: term.column, levels, reference };
    const index = indexOfLevels(basis, perRow);
    return {
      basis,
      rows: { storage: "index", width: levels.length, index, values: null },
      seen: seenLevels(levels, index),
      observedRange: null,
      warnings: [],
    };
  },
  rows: (basis, data) => ({
    storage: "index",
    width: basis.levels.length,
    index: indexOfLevels(basis, levelColumn(data, basis.column, role)),
    values: null,
  }),
  logSlopeRows: () => null,
  outside: (_range, basis, data) => new Uint8Array(levelColumn(data, basis.column, role).length),
  names: (basis, id) => basis.levels.map((level) => `${id}[${level}]`),
};

function byNumberThenText(left: string, right: string): number {
  const difference = Number(left) - Number(right);
  if (Number.isFinite(difference) && difference !== 0) return difference;
  return left < right ? -1 : Number(left > right);
}

function indexOfLevels(basis: FactorBasis, perRow: readonly string[]): Int32Array {
  const positions = new Map(basis.levels.map((level, position) => [level, position]));
  const index = new Int32Array(perRow.length);
  for (let row = 0; row < perRow.length; row++) {
    const position = positions.get(perRow[row]);
    if (position === undefined) {
      throw new EngineError(
        "level-unknown",
        `Level "${perRow[row]}" of factor "${basis.column}" (row ${row + 1}) was never seen in the fit; seen were ${quoted(basis.levels)}.`,
      );
    }
    index[row] = position;
  }
  return index;
}
