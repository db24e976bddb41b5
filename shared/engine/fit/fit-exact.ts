import { bestPenalties, planPenalties } from "./choose-penalties";
import { solveCoordinates } from "./coefficients";
import type { CoefficientMap } from "./coefficients";
import type { Design } from "./design";
import { createScratch, normalEquations } from "./normal-equations";
import { predictorOf } from "./predictor";
import { eliminateUnpenalised } from "./reduced-system";
import { checkRowsSuffice } from "./row-budget";
import type { WorkingFit } from "./working-fit";

/** Response on the link scale, offset and prior weights of the fitted rows. */
export type ExactRows = { response: Float64Array; offset: Float64Array; weights: Float64Array };

/**
 * Fits a family whose transformed response is normal: one working model, exact restricted likelihood, two starts.
 *
 * @param map coefficients from coordinates, as `coefficientMap` gives.
 * @throws EngineError too-few-rows.
 * @example fitExact(design, { response, offset, weights }, coefficientMap(design)).criterion;
 */
export function fitExact(design: Design, rows: ExactRows, map: CoefficientMap): WorkingFit {
  const { response, offset, weights } = rows;
  const working = response.map((value, row) => value - offset[row]);
  const equations = normalEquations(design, { response: working, weights }, createScratch(design));
  const reduced = eliminateUnpenalised(equations, design, null);
  checkRowsSuffice(reduced);
  const { search, rested } = bestPenalties(reduced, design, planPenalties(design));
  const coordinates = solveCoordinates(reduced, search.current);
  coordinates[0] += equations.shift;
  return {
    reduced, search, coordinates,
    linearPredictor: predictorOf(design, map, coordinates, offset),
    criterion: search.current.criterion,
    converged: rested,
    iterations: 1,
  };
}
