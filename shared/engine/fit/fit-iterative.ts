import type { IterativeRules } from "../family/family-rules";
import type { DroppedColumn } from "../linalg/dropping-cholesky";
import { planPenalties, refinePenalties, startPenalties } from "./choose-penalties";
import type { PenaltyPlan } from "./choose-penalties";
import { solveCoordinates } from "./coefficients";
import type { CoefficientMap } from "./coefficients";
import type { Design } from "./design";
import { createScratch, normalEquations } from "./normal-equations";
import type { Scratch } from "./normal-equations";
import { createSearch } from "./penalty-search";
import type { PenaltySearch } from "./penalty-search";
import { predictorOf } from "./predictor";
import { eliminateUnpenalised } from "./reduced-system";
import type { ReducedSystem } from "./reduced-system";
import { checkRowsSuffice } from "./row-budget";
import { penaltyValue } from "./working-fit";
import type { WorkingFit } from "./working-fit";

export type IterativeRows = { response: Float64Array; offset: Float64Array; weights: Float64Array };

type Problem = {
  design: Design;
  family: IterativeRules;
  rows: IterativeRows;
  map: CoefficientMap;
  plan: PenaltyPlan;
  scratch: Scratch;
  maxIterations: number;
  workingResponse: Float64Array;
  workingWeights: Float64Array;
  mean: Float64Array;
};

/** Weighted mean square by which the linear predictor may still move at convergence. */
const movementTolerance = 1e-14;

/**
 * Fits by iterated working models, the penalties by restricted likelihood of the working model, until predictor and
 * penalties rest. From the stiff start first; then the loose start is searched in the working model found, and, where it
 * is drawn to another optimum, followed to its own rest; the better criterion (with the deviance as D) wins.
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
    scratch: createScratch(design),
    workingResponse: new Float64Array(count),
    workingWeights: new Float64Array(count),
    mean: new Float64Array(count),
  };
  const predictor = rows.response.map(family.start);
  const stiff = iterate(problem, { predictor, logFactor: 6 });
  if (problem.plan.automatic.length === 0) return stiff;
  const loosePenalties = looseOptimum(problem, stiff);
  if (loosePenalties === null) return stiff;
  const loose = iterate(problem, { predictor: stiff.linearPredictor, penalties: loosePenalties, known: stiff.reduced.dropped });
  return loose.converged && loose.criterion < stiff.criterion ? loose : stiff;
}

/** Log penalties of another optimum of the working model at rest, or null where the loose start is drawn to the same. */
function looseOptimum(problem: Problem, stiff: WorkingFit): Float64Array | null {
  const { plan, design } = problem;
  const search = createSearch(stiff.reduced, design.blocks);
  const known = stiff.search.current.logPenalties;
  const start = startPenalties(search, plan, -6);
  for (const { block } of plan.fixedDegrees) start[block] = known[block];
  refinePenalties(search, stiff.reduced, plan, { start, fellnerSchallSteps: 2, maxSteps: 60, stopNear: known });
  const found = search.current.logPenalties;
  const isSame = plan.automatic.every((block) => {
    const bothStraight = found[block] > search.highest[block] - 4 && known[block] > search.highest[block] - 4;
    return bothStraight || Math.abs(found[block] - known[block]) < 0.25;
  });
  return isSame ? null : found.slice();
}

type Start = { predictor: Float64Array; logFactor?: number; penalties?: Float64Array; known?: DroppedColumn[] };

function iterate(problem: Problem, start: Start): WorkingFit {
  const { design, plan } = problem;
  let predictor: Float64Array = start.predictor.slice();
  let dropped = start.known ?? null;
  let search: PenaltySearch | null = null;
  let penalties = start.penalties ?? null;
  let coordinates: Float64Array | null = null;
  let converged: boolean;
  let iterations = 0;
  let reduced: ReducedSystem;
  do {
    iterations++;
    const equations = workingEquations(problem, predictor);
    reduced = eliminateUnpenalised(equations, design, dropped);
    dropped = reduced.dropped;
    if (iterations === 1) checkRowsSuffice(reduced);
    search ??= createSearch(reduced, design.blocks);
    penalties ??= startPenalties(search, plan, start.logFactor ?? 0);
    const rested = refinePenalties(search, reduced, plan, {
      start: penalties, fellnerSchallSteps: iterations === 1 ? 2 : 0, maxSteps: 4,
    });
    penalties = search.current.logPenalties.slice();
    const next = solveCoordinates(reduced, search.current);
    next[0] += equations.shift;
    const accepted = acceptableStep(problem, { from: coordinates, to: next, predictor, penalty: penaltyValue(search) });
    converged = rested && iterations > 1 && movement(accepted.predictor, predictor, problem.workingWeights) < movementTolerance;
    ({ predictor, coordinates } = accepted);
  } while (!converged && iterations < problem.maxIterations);
  const criterion = devianceCriterion(problem, { predictor, reduced, search });
  return { reduced, search, coordinates, linearPredictor: predictor, criterion, converged, iterations };
}

function workingEquations(problem: Problem, predictor: Float64Array) {
  const { family, rows, mean, workingResponse, workingWeights } = problem;
  for (let row = 0; row < mean.length; row++) mean[row] = family.mean(predictor[row], 1);
  family.working({ ...rows, linearPredictor: predictor, mean, workingResponse, workingWeights });
  return normalEquations(problem.design, { response: workingResponse, weights: workingWeights }, problem.scratch);
}

/** Halves a step that raises the penalised deviance beyond reason: far from the answer a full step can overshoot. */
function acceptableStep(
  problem: Problem, step: { from: Float64Array | null; to: Float64Array; predictor: Float64Array; penalty: number },
): { predictor: Float64Array; coordinates: Float64Array } {
  const { design, map, rows } = problem;
  let coordinates = step.to;
  let predictor = predictorOf(design, map, coordinates, rows.offset);
  const { from } = step;
  if (from === null) return { predictor, coordinates };
  const before = devianceOf(problem, step.predictor) + step.penalty;
  for (let halving = 0; halving < 20; halving++) {
    const deviance = devianceOf(problem, predictor);
    if (Number.isFinite(deviance) && deviance <= 2 * before + 1e-8) break;
    coordinates = coordinates.map((value, k) => (value + from[k]) / 2);
    predictor = predictorOf(design, map, coordinates, rows.offset);
  }
  return { predictor, coordinates };
}

function devianceOf(problem: Problem, predictor: Float64Array): number {
  const { family, rows } = problem;
  let sum = 0;
  for (let row = 0; row < predictor.length; row++) {
    sum += rows.weights[row] * family.unitDeviance(rows.response[row], family.mean(predictor[row], 1));
  }
  return sum;
}

function movement(next: Float64Array, before: Float64Array, weights: Float64Array): number {
  let moved = 0;
  let total = 0;
  for (let row = 0; row < next.length; row++) {
    const change = next[row] - before[row];
    moved += weights[row] * change * change;
    total += weights[row];
  }
  return moved / total;
}

/** 1/2 [(n - Mp) ln(D + b'Sb) + ln|X'WX + S| - ln|S|+] with the deviance as D: the same yardstick for every working model. */
function devianceCriterion(
  problem: Problem, at: { predictor: Float64Array; reduced: ReducedSystem; search: PenaltySearch },
): number {
  const { reduced, search } = at;
  const deviance = Math.max(devianceOf(problem, at.predictor) + penaltyValue(search), Number.MIN_VALUE * 1e30);
  const { penalisedResidual, criterion } = search.current;
  return criterion + 0.5 * (reduced.rowCount - reduced.unpenalisedKept) * (Math.log(deviance) - Math.log(penalisedResidual));
}
