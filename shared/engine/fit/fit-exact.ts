import { bestPenalties, planPenalties } from "./choose-penalties";
import type { CoefficientMap } from "./coefficient-map";
import type { Design } from "./design";
import { createScratch } from "./equation-scratch";
import { normalEquations } from "./normal-equations";
import { layOutPenalties } from "./penalties";
import { coefficientsAt, predictorOf } from "./predictor";
import { shapeConstraints } from "./shape-constraints";
import { shiftedCoordinates } from "./working-fit";
import type { WorkingFit } from "./working-fit";
import { solveWorking } from "./working-model";

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
  const working = response.slice();
  for (let row = 0; row < working.length; row++) working[row] -= offset[row];
  const equations = normalEquations(design, { response: working, weights }, createScratch(design));
  const plan = planPenalties(design);
  const problem = {
    design, plan, scale: "unknown" as const,
    layout: layOutPenalties(design.penalties, design.groups?.count ?? 1),
    constraints: shapeConstraints(design),
  };
  const solution = solveWorking(problem, equations, { dropped: null, search: null, held: null }, (search) => bestPenalties(search, plan));
  const coordinates = shiftedCoordinates(solution, equations);
  return {
    solution, equations, coordinates,
    linearPredictor: predictorOf(design, coefficientsAt(design, map, coordinates), offset),
    theta: null,
    criterion: solution.search.current.criterion,
    converged: solution.rested,
    iterations: 1,
  };
}
