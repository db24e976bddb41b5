import { EngineError } from "../errors";
import type { FactorBasis, FactorTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { levelColumn, quoted } from "./columns";
import { knownPositions, learnLevels } from "./levels";
import { seenLevels } from "./seen-values";

const role = "factor";

/**
 * One indicator column per level, in sorted order (numbers by size). The reference level keeps its column, with a
 * coefficient that stays zero, so that a row's level is its column's index.
 */
export const factor: BasisKind<FactorTerm, FactorBasis> = {
  learn(term, _id, data) {
    const { levels, index } = learnLevels(data, term.column, role);
    const reference = term.reference ?? levels[0];
    if (!levels.includes(reference)) {
      throw new EngineError(
        "level-unknown",
        `Reference level "${reference}" of factor "${term.column}" is not among its levels ${quoted(levels)}.`,
      );
    }
    return {
      basis: { kind: "factor", column: term.column, levels, reference },
      rows: { storage: "index", width: levels.length, index, values: null },
      seen: seenLevels(levels, index),
      observedRange: null,
      warnings: [],
    };
  },
  rows: (basis, data) => ({
    storage: "index",
    width: basis.levels.length,
    index: knownPositions(basis, levelColumn(data, basis.column, role)),
    values: null,
  }),
  logSlopeRows: () => null,
  outside: (_range, basis, data) => new Uint8Array(levelColumn(data, basis.column, role).length),
  names: (basis, id) => basis.levels.map((level) => `${id}[${level}]`),
};
