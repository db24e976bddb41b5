import type { PenaltySearch } from "./penalty-search";
import type { ReducedSystem } from "./reduced-system";

/** A fit as the solvers leave it: the last working model, its penalties, and the coordinates in the design's layout. */
export type WorkingFit = {
  reduced: ReducedSystem;
  search: PenaltySearch;
  /** Fitting coordinates; the intercept's includes the shift of the working response. */
  coordinates: Float64Array;
  /** Linear predictor per fitted row, offset included. */
  linearPredictor: Float64Array;
  criterion: number;
  converged: boolean;
  iterations: number;
};

/** b'Sb over all blocks. */
export function penaltyValue(search: PenaltySearch): number {
  const { logPenalties, squares } = search.current;
  return search.blocks.reduce((sum, _block, j) => sum + Math.exp(logPenalties[j]) * squares[j], 0);
}
