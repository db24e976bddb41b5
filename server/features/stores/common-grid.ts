import type { FittedTerm } from "@shared/engine";

/**
 * Values that all stores' curves of a driver are drawn at. For numbers: from the lowest to the highest that any store has
 * seen, evenly spaced (by ratio where a term is of a logarithm; round the whole circle for a time of year). For levels:
 * those that any store knows, references first.
 *
 * @param terms the driver's term of each store; at least one, all of them of numbers or all of levels.
 * @param points how many numbers.
 */
export function commonGrid(terms: readonly FittedTerm[], points: number): number[] | string[] {
  const [{ basis }] = terms;
  if (basis.kind === "factor") return commonLevels(terms);
  if (basis.kind === "cyclic-smooth") return evenly({ from: basis.lower, to: basis.upper, points, isByRatio: false });
  const ranges = terms.map((term) => term.observedRange).filter((range) => range !== null);
  const from = Math.min(...ranges.map(([lowest]) => lowest));
  const to = Math.max(...ranges.map(([, highest]) => highest));
  return evenly({ from, to, points, isByRatio: "log" in basis && basis.log });
}

function commonLevels(terms: readonly FittedTerm[]): string[] {
  const bases = terms.map((term) => term.basis).filter((basis) => basis.kind === "factor");
  const references = new Set(bases.map((basis) => basis.reference));
  const levels = new Set(bases.flatMap((basis) => basis.levels));
  return [...references, ...[...levels].filter((level) => !references.has(level)).sort()];
}

function evenly(
  { from, to, points, isByRatio }: { from: number; to: number; points: number; isByRatio: boolean },
): number[] {
  const grid = Array.from({ length: points }, (_, index) => {
    const share = index / (points - 1);
    return isByRatio ? from * (to / from) ** share : from + (to - from) * share;
  });
  // The last power may round to a hair below.
  grid[points - 1] = to;
  return grid;
}
