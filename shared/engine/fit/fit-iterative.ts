import type { IterativeRules } from "../family/family-rules";
import { acceptableStep, shareOfStep } from "./accepted-step";
import { freedPenalties, isLimit, maxSteps, planPenalties, refinePenalties, startPenalties } from "./choose-penalties";
import type { PenaltyPlan } from "./choose-penalties";
import type { CoefficientMap } from "./coefficient-map";
import type { Design } from "./design";
import { createScratch } from "./equation-scratch";
import type { Scratch } from "./equation-scratch";
import { near } from "./known-optimum";
import { normalEquations } from "./normal-equations";
import type { NormalEquations } from "./normal-equations";
import { layOutPenalties } from "./penalties";
import { searchBeside } from "./penalty-search";
import type { PenaltySearch } from "./penalty-search";
import type { Coordinates } from "./predictor";
import { criterionAtRest, movement } from "./rest";
import type { IterativeRows } from "./rest";
import { shapeConstraints } from "./shape-constraints";
import { penaltyValue, shiftedCoordinates } from "./working-fit";
import type { WorkingFit } from "./working-fit";
import { solveWorking } from "./working-model";
import type { Before, WorkingProblem, WorkingSolution } from "./working-model";

type Problem = WorkingProblem & {
  family: IterativeRules;
  rows: IterativeRows;
  map: CoefficientMap;
  scratch: Scratch;
  maxIterations: number;
  workingResponse: Float64Array;
  workingWeights: Float64Array;
  mean: Float64Array;
};

/** Weighted mean square by which the linear predictor may still move at convergence, and theta as a share of itself. */
const movementTolerance = 1e-12;
const thetaTolerance = 1e-8;

/** Fall of a working model's criterion that is not worth another step in it: the next model's penalties move anyway. */
const enoughInside = 1e-3;

/** Working models after which a constraint once held is not let go any more. */
const settlingIterations = 5;

/**
 * Fits by iterated working models, the penalties by restricted likelihood of the working model, until predictor, penalties
 * (and theta, where the family has one) rest. From the stiff start first; then the loose start is searched in the working
 * model found, and, where it is drawn to another optimum, followed to its own rest; the better criterion wins.
 * Source: Breslow & Clayton (1993), J. Am. Statist. Assoc. 88, 9-25; Wood, Goude & Shaw (2015), J. R. Statist. Soc. C 64.
 *
 * @param map coefficients from coordinates, as `coefficientMap` gives.
 * @throws EngineError too-few-rows.
 * @example fitIterative(design, familyRules, { response, offset, weights }, { map, maxIterations: 200 }).converged;
 */
export function fitIterative(
  design: Design, family: IterativeRules, rows: IterativeRows, options: { map: CoefficientMap; maxIterations: number },
): WorkingFit {
  const count = rows.response.length;
  const problem: Problem = {
    design, family, rows, ...options,
    plan: planPenalties(design),
    layout: layOutPenalties(design.penalties, design.groups?.count ?? 1),
    scale: family.scale,
    constraints: shapeConstraints(design),
    scratch: createScratch(design),
    workingResponse: new Float64Array(count),
    workingWeights: new Float64Array(count),
    mean: new Float64Array(count),
  };
  const nothing: Before = { dropped: null, search: null, held: null };
  const stiff = iterate(problem, { predictor: family.start(rows), theta: 1, logFactor: 6, before: nothing });
  if (problem.plan.automatic.length === 0) return stiff;
  return [looseStart, freedPenalties].reduce((best, startOf) => anotherOptimum(problem, best, startOf) ?? best, stiff);
}

/** The loose start, but what is held to degrees of freedom or given stays as it is. */
function looseStart(search: PenaltySearch, plan: PenaltyPlan): Float64Array {
  const start = startPenalties(search, plan, -6);
  for (const { penalties } of plan.asked) for (const penalty of penalties) start[penalty] = search.current.logPenalties[penalty];
  return start;
}

/**
 * Searches from another start in the working model at rest; where that is drawn to another optimum, follows it to its own
 * rest. Null where it is drawn to the same, or to one of a higher criterion.
 */
function anotherOptimum(
  problem: Problem, best: WorkingFit, startOf: (search: PenaltySearch, plan: PenaltyPlan) => Float64Array | null,
): WorkingFit | null {
  const { plan } = problem;
  const { solution: { search: { current: known }, touched, system: { dropped } } } = best;
  const start = startOf(best.solution.search, plan);
  if (start === null) return null;
  const search = searchBeside(best.solution.search);
  if (refinePenalties(search, plan, { start, fellnerSchallSteps: startOf === looseStart ? 2 : 0, maxSteps, known }) === "known") return null;
  const found = search.current.logPenalties;
  const isSame = plan.automatic.every((penalty) => {
    const bothStraight = isLimit(search, penalty, found[penalty]) && isLimit(search, penalty, known.logPenalties[penalty]);
    return bothStraight || Math.abs(found[penalty] - known.logPenalties[penalty]) < near;
  });
  if (isSame) return null;
  const other = iterate(problem, {
    predictor: best.linearPredictor, theta: best.theta ?? 1, penalties: found.slice(), before: { dropped, search: null, held: touched },
  });
  return other.converged && other.criterion < best.criterion ? other : null;
}

type Start = { predictor: Float64Array; theta: number; logFactor?: number; penalties?: Float64Array; before: Before };

function iterate(problem: Problem, start: Start): WorkingFit {
  const { plan, family } = problem;
  let { predictor, theta, before } = start;
  let penalties = start.penalties ?? null;
  let coordinates: Coordinates | null = null;
  let deviance: number | null = null;
  let converged: boolean;
  let iterations = 0;
  let equations: NormalEquations;
  let solution: WorkingSolution;
  do {
    iterations++;
    equations = workingEquations(problem, predictor, theta);
    solution = solveWorking(problem, equations, before, (search) => {
      penalties ??= startPenalties(search, plan, start.logFactor ?? 0);
      const end = refinePenalties(search, plan, { start: penalties, fellnerSchallSteps: iterations === 1 ? 2 : 0, maxSteps: 4, enough: enoughInside });
      penalties = search.current.logPenalties.slice();
      return end === "rested";
    });
    before = {
      dropped: solution.system.dropped, search: solution.search,
      held: iterations < settlingIterations ? solution.touched : solution.held,
    };
    const accepted = acceptableStep(problem, {
      from: coordinates, to: shiftedCoordinates(solution, equations), predictor, theta, penalty: penaltyValue(solution.search),
      share: shareOfStep(iterations), deviance,
    });
    const nextTheta = nextThetaOf(problem, accepted.predictor, theta);
    const rests = movement(accepted.predictor, predictor, problem.workingWeights) < movementTolerance
      && Math.abs(nextTheta / theta - 1) < thetaTolerance;
    converged = solution.rested && iterations > 1 && rests;
    deviance = nextTheta === theta ? accepted.deviance : null;
    theta = nextTheta;
    ({ predictor, coordinates } = accepted);
  } while (!converged && iterations < problem.maxIterations);
  const criterion = criterionAtRest(problem, { predictor, solution, theta });
  return {
    solution, equations, coordinates, linearPredictor: predictor, criterion, converged, iterations,
    theta: family.estimateTheta === null ? null : theta,
  };
}

function nextThetaOf({ family, rows, mean }: Problem, predictor: Float64Array, theta: number): number {
  if (family.estimateTheta === null) return theta;
  for (let row = 0; row < mean.length; row++) mean[row] = family.mean(predictor[row], 1);
  return family.estimateTheta({ response: rows.response, mean, weights: rows.weights, start: theta });
}

function workingEquations(problem: Problem, predictor: Float64Array, theta: number): NormalEquations {
  const { family, rows, mean, workingResponse, workingWeights } = problem;
  for (let row = 0; row < mean.length; row++) mean[row] = family.mean(predictor[row], 1);
  family.working({ ...rows, linearPredictor: predictor, mean, theta, workingResponse, workingWeights });
  return normalEquations(problem.design, { response: workingResponse, weights: workingWeights }, problem.scratch);
}
