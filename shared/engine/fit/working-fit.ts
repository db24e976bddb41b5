import type { NormalEquations } from "./normal-equations";
import type { Coordinates } from "./predictor";
import type { PenaltySearch } from "./penalty-search";
import type { WorkingSolution } from "./working-model";

/** A fit as the solvers leave it: the last working model solved, its equations, and what follows for the rows. */
export type WorkingFit = {
  solution: WorkingSolution;
  equations: NormalEquations;
  /** The intercept's includes the shift of the working response. */
  coordinates: Coordinates;
  /** Linear predictor per fitted row, offset included. */
  linearPredictor: Float64Array;
  /** Of the negative binomial; null for other families. */
  theta: number | null;
  criterion: number;
  converged: boolean;
  iterations: number;
};

/** b'Sb over all penalties. */
export function penaltyValue(search: PenaltySearch): number {
  const { multipliers, squares } = search.current;
  let sum = 0;
  for (let j = 0; j < multipliers.length; j++) sum += multipliers[j] * squares[j];
  return sum;
}

/** Estimates of a solved working model, the response's shift given back to the intercept. */
export function shiftedCoordinates(solution: WorkingSolution, equations: NormalEquations): Coordinates {
  const shared = solution.coordinates.slice();
  shared[0] += equations.shift;
  return { shared, groups: solution.groupCoordinates };
}
