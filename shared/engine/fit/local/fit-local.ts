import type { FamilyRules } from "../../family/family-rules";
import { applyMap } from "../coefficient-map";
import type { CoefficientMap } from "../coefficient-map";
import type { Design } from "../design";
import { criterionAtRest, devianceOf, movement } from "../rest";
import type { FittedRows } from "../fitted-rows";
import { createScratch } from "../equation-scratch";
import { normalEquations } from "../normal-equations";
import type { NormalEquations } from "../normal-equations";
import { predictorOf } from "../predictor";
import { shiftedCoordinates } from "../working-fit";
import type { WorkingFit } from "../working-fit";
import { coordinateEdf, reducedInverse } from "./joint-posterior";
import { penaltyDiagonal, solveJoint } from "./joint-solution";
import type { JointSolution } from "./joint-solution";
import { jointSystem } from "./joint-system";
import type { JointSystem } from "./joint-system";
import { lessCurves } from "./less-curves";
import { adjustAsked, penaltyTurns, settle, takeTurn } from "./penalty-turns";
import type { PenaltyTurns } from "./penalty-turns";
import { pooledDesign } from "./pooled-design";
import type { PooledDesign } from "./pooled-design";
import { checkToldApart } from "./told-apart";
import { createWorkingRows, writeWorkingRows } from "./working-rows";
import type { WorkingRows } from "./working-rows";

/** A fit with local regressions: the other terms' working model beside the curves, and the joint solution. */
export type LocalFit = WorkingFit & { joint: JointSolution; /** Working weights of the rows at rest. */ workingWeights: Float64Array };

/**
 * At rest: change of a log penalty, missing degrees of freedom, theta as a share, and the predictor's weighted mean square.
 * Kernels move with the working weights, so that steps shrink by a share each and not, as Newton's, by squares.
 */
const penaltyTolerance = 1e-6;
const degreesTolerance = 1e-7;
const thetaTolerance = 1e-8;
const movementTolerance = 1e-16;

/** Turns of penalties and curves where the working model does not change. */
const mostTurns = 50;

/**
 * Fits a model with local regressions: an exact solve of each working model for all terms at once in place of backfitting
 * (see `jointSystem`), local scoring where the family is not normal (Hastie & Tibshirani 1990, section 6.3). Penalties of
 * other terms are chosen in turn with the local curves, by restricted likelihood of the response less these curves, until
 * they rest; degrees of freedom asked for are those of the trace in the joint fit.
 *
 * @param map coefficients from coordinates, as `coefficientMap` gives.
 * @throws EngineError spec-invalid where terms cannot be told apart from a local curve; too-few-rows.
 * Cost per working model: O(n x pairs + n x points + (unknowns but those of the widest local regression)^3 / 3).
 * @example fitLocal(design, familyRules("gaussian"), rows, { map, maxIterations: 200 }).joint.curves;
 */
export function fitLocal(
  design: Design, family: FamilyRules, rows: FittedRows, options: { map: CoefficientMap; maxIterations: number },
): LocalFit {
  const layout = pooledDesign(design);
  const run: Run = { design, layout, family, rows, map: options.map, turns: penaltyTurns(design, family.scale), scratch: createScratch(layout.pooled) };
  const limit = family.fitting === "exact" ? mostTurns : options.maxIterations;
  const working = createWorkingRows(family, rows);
  let state = firstStep(run, working);
  while (!state.atRest && state.iterations < limit) state = nextStep(run, working, state);
  return finish(run, state, working.weights);
}

type Run = {
  design: Design; layout: PooledDesign; family: FamilyRules; rows: FittedRows; map: CoefficientMap;
  turns: PenaltyTurns; scratch: ReturnType<typeof createScratch>;
};

type State = {
  equations: NormalEquations; system: JointSystem; joint: JointSolution;
  predictor: Float64Array; theta: number; iterations: number; atRest: boolean;
};

function firstStep(run: Run, working: WorkingRows): State {
  const { family, rows, layout } = run;
  const start = family.fitting === "exact" ? rows.offset : family.start(rows);
  writeWorkingRows(working, start, 1);
  const equations = normalEquations(layout.pooled, working, run.scratch);
  checkToldApart(layout, equations);
  return solveStep(run, { working, equations, known: null, curves: new Float64Array(layout.size), from: start, theta: 1, iterations: 1 });
}

function nextStep(run: Run, working: WorkingRows, state: State): State {
  const { predictor, theta, joint: { curves }, iterations } = state;
  const isExact = run.family.fitting === "exact";
  if (!isExact) writeWorkingRows(working, predictor, theta);
  const equations = isExact ? state.equations : normalEquations(run.layout.pooled, working, run.scratch);
  return solveStep(run, { working, equations, known: isExact ? state.system : null, curves, from: predictor, theta, iterations: iterations + 1 });
}

type Step = {
  working: WorkingRows; equations: NormalEquations; known: JointSystem | null; curves: Float64Array;
  from: Float64Array; theta: number; iterations: number;
};

function solveStep(run: Run, step: Step): State {
  const { design, layout, turns } = run;
  const { equations, iterations, theta } = step;
  const { search, system: { dropped }, rested } = takeTurn(turns, lessCurves(layout, equations, step.curves));
  const system = step.known ?? jointSystem(layout, equations, dropped);
  const joint = solveJoint(system, penaltyDiagonal(design, search.current.multipliers));
  const missing = turns.plan.asked.length === 0 ? 0 : adjustAsked(turns, coordinateEdf(joint, reducedInverse(joint)));
  const arrived = predictorAt(run, joint, equations.shift);
  const predictor = iterations === 1 ? arrived : acceptable(run, { ...step, to: arrived, joint });
  const nextTheta = thetaAt(run, predictor, theta);
  const penaltiesRest = !turns.isFree || (rested && turns.moved < penaltyTolerance && missing < degreesTolerance);
  const rests = run.family.fitting === "exact" || (iterations > 1
    && movement(predictor, step.from, step.working.plain) < movementTolerance && Math.abs(nextTheta / theta - 1) < thetaTolerance);
  return { equations, system, joint, predictor, theta: nextTheta, iterations, atRest: penaltiesRest && rests };
}

/** Linear predictor of the fitted rows: other terms by their coefficients, local curves by their values at the points. */
function predictorAt({ design, layout, map, rows }: Run, { unknowns, curves, level }: JointSolution, shift: number): Float64Array {
  const coordinates = unknowns.slice(0, layout.fixed);
  coordinates[0] += shift + level;
  const coefficients = applyMap(map, coordinates);
  for (const { part, first, count } of layout.locals) coefficients.set(curves.subarray(first, first + count), part.rawFirst);
  return predictorOf(design, coefficients, rows.offset);
}

/** Halves a step that raises the penalised deviance beyond reason: far from the answer a full step can overshoot. */
function acceptable({ family, rows }: Run, step: Step & { to: Float64Array; joint: JointSolution }): Float64Array {
  const { from, theta, joint: { penalty, unknowns } } = step;
  if (family.fitting === "exact") return step.to;
  const penalised = penalty.reduce((sum, weight, k) => sum + weight * unknowns[k] ** 2, 0);
  const before = devianceOf({ family, rows }, from, theta) + penalised;
  let predictor = step.to;
  for (let halving = 0; halving < 20; halving++) {
    const deviance = devianceOf({ family, rows }, predictor, theta);
    if (Number.isFinite(deviance) && deviance <= 2 * before + 1e-8) break;
    predictor = predictor.map((value, row) => (value + from[row]) / 2);
  }
  return predictor;
}

function thetaAt({ family, rows }: Run, predictor: Float64Array, theta: number): number {
  if (family.fitting === "exact" || family.estimateTheta === null) return theta;
  const mean = predictor.map((value) => family.mean(value, 1));
  return family.estimateTheta({ response: rows.response, mean, weights: rows.weights, start: theta });
}

function finish(run: Run, state: State, workingWeights: Float64Array): LocalFit {
  const { layout, turns, family, rows } = run;
  const { equations, joint, iterations, theta, atRest } = state;
  const others = lessCurves(layout, equations, joint.curves);
  const settled = settle(turns, others);
  // Whether a fit is perfect is judged by the response, not by what the curves left of it.
  const solution = { ...settled, system: { ...settled.system, yardstick: equations.total } };
  const linearPredictor = predictorAt(run, joint, equations.shift);
  return {
    solution, equations: others, joint, linearPredictor, iterations, workingWeights,
    coordinates: shiftedCoordinates(solution, others),
    theta: family.fitting === "exact" || family.estimateTheta === null ? null : theta,
    criterion: family.fitting === "exact" ? solution.search.current.criterion : criterionAtRest({ family, rows }, { predictor: linearPredictor, solution, theta }),
    converged: atRest,
  };
}
