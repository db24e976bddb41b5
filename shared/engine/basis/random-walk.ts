import { EngineError } from "../errors";
import type { IndexRows } from "../linalg/sparse-rows";
import type { ModelData, RandomWalkBasis, RandomWalkTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { numberColumn } from "./columns";
import { checkDistinct } from "./curve-checks";
import { outsideRange, rangeOf } from "./ranges";
import { seenNumbers } from "./seen-values";

const role = "random-walk";
const mostWeeks = 1500;

/**
 * A level per week, from the first seen to the last, weeks without rows too: a random walk (Rue & Held 2005, section 3.3.1).
 * Before the first and after the last week it is held flat.
 */
export const randomWalk: BasisKind<RandomWalkTerm, RandomWalkBasis> = {
  learn(term, id, data) {
    const weeks = wholeNumbers(term.column, data);
    const seen = seenNumbers(weeks);
    checkDistinct(seen.values, term.column, id);
    const [first, last] = rangeOf(seen.values);
    if (last - first + 1 > mostWeeks) {
      throw new EngineError(
        "spec-invalid",
        `Term "${id}": column "${term.column}" runs from ${first} to ${last}, ${last - first + 1} weeks; a random walk has at most ${mostWeeks}.`,
      );
    }
    const basis: RandomWalkBasis = { kind: "random-walk", column: term.column, first, last, centring: new Float64Array(last - first + 1) };
    return { basis, rows: rowsAt(basis, weeks), seen, observedRange: [first, last], warnings: [] };
  },
  rows: (basis, data) => rowsAt(basis, wholeNumbers(basis.column, data)),
  logSlopeRows: () => null,
  outside: (range, basis, data) => outsideRange(range, wholeNumbers(basis.column, data)),
  names: (basis, id) => Array.from({ length: basis.last - basis.first + 1 }, (_, k) => `${id}[${basis.first + k}]`),
};

function rowsAt({ first, last }: RandomWalkBasis, weeks: Float64Array): IndexRows {
  const index = Int32Array.from(weeks, (week) => Math.min(Math.max(week, first), last) - first);
  return { storage: "index", width: last - first + 1, index, values: null };
}

function wholeNumbers(column: string, data: ModelData): Float64Array {
  const weeks = numberColumn(data, column, role);
  const row = weeks.findIndex((week) => !Number.isSafeInteger(week));
  if (row < 0) return weeks;
  throw new EngineError("column-kind", `Column "${column}" (${role}) must hold whole numbers of weeks; row ${row + 1} is ${weeks[row]}.`);
}
