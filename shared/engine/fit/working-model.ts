import type { DroppedColumn } from "../linalg/dropping-cholesky";
import { arrowSystem } from "./arrow-system";
import type { PenaltyPlan } from "./choose-penalties";
import { coordinateCovariance, sharedCoordinates } from "./coordinates";
import type { Design } from "./design";
import { eliminateUnpenalised } from "./eliminate-unpenalised";
import type { LikelihoodState } from "./likelihood-state";
import type { NormalEquations } from "./normal-equations";
import type { PenaltyLayout } from "./penalties";
import { createSearch, derivatives, evaluateAt, repoint } from "./penalty-search";
import type { PenaltySearch } from "./penalty-search";
import type { PenalisedSystem, Scale } from "./restricted-likelihood";
import { checkRowsSuffice } from "./row-budget";
import type { ShapeConstraints } from "./shape-constraints";
import { heldPerPenalty, holdConstraints, linesHeld, projectOntoShape } from "./shape-constraints";

/** What stays the same from one working model to the next. */
export type WorkingProblem = {
  design: Design;
  plan: PenaltyPlan;
  layout: PenaltyLayout;
  scale: Scale;
  constraints: ShapeConstraints | null;
};

/** A working model solved: penalties chosen, estimates found. */
export type WorkingSolution = {
  system: PenalisedSystem;
  /** Its current state is the posterior: estimates and inverse without the shapes. */
  search: PenaltySearch;
  /** Effective degrees of freedom under each penalty; with shapes, of the model whose touched constraints are held. */
  edf: Float64Array;
  /** Estimates of the shared coordinates and, group after group, of the groups'. */
  coordinates: Float64Array;
  groupCoordinates: Float64Array | null;
  /** 1 per constraint the curves touch, and per constraint held while penalties were chosen; null without shapes. */
  touched: Uint8Array | null;
  held: Uint8Array | null;
  rested: boolean;
};

/** From the last working model: what to begin with. */
export type Before = { dropped: DroppedColumn[] | null; search: PenaltySearch | null; held: Uint8Array | null };

/**
 * Solves one working model: penalties by `choose`, estimates, and, where curves have a shape, both in turn until no
 * further constraint is touched. A constraint once held stays so while penalties are chosen: letting it go could loosen the
 * penalty, which would touch it again, without end.
 *
 * @param choose moves the search's penalties and says whether they came to rest.
 * @throws EngineError too-few-rows.
 * @example solveWorking(problem, equations, before, (search) => bestPenalties(search, plan)).coordinates;
 */
export function solveWorking(
  problem: WorkingProblem, equations: NormalEquations, before: Before, choose: (search: PenaltySearch) => boolean,
): WorkingSolution {
  const { design, layout, scale, constraints } = problem;
  const system = createSystem(equations, design, before.dropped);
  if (before.dropped === null) checkRowsSuffice(system);
  const search = before.search ?? createSearch({ system, layout, scale });
  repoint(search, system);
  if (constraints === null) {
    const rested = choose(search);
    const state = derivatives(search, "gradient");
    const { coordinates, groupCoordinates } = estimates(system, state);
    return { system, search, edf: state.edf, coordinates, groupCoordinates, touched: null, held: null, rested };
  }
  return solveShaped({ problem, equations, system, search, constraints, choose, held: before.held ?? new Uint8Array(constraints.count) });
}

function createSystem(equations: NormalEquations, design: Design, known: DroppedColumn[] | null): PenalisedSystem {
  return equations.groups === null
    ? eliminateUnpenalised(equations, design, known)
    : arrowSystem(equations, equations.groups, design, known);
}

function estimates(system: PenalisedSystem, state: LikelihoodState): { coordinates: Float64Array; groupCoordinates: Float64Array | null } {
  return { coordinates: sharedCoordinates(system, state), groupCoordinates: state.arrow?.coefficients.slice() ?? null };
}

type Shaped = {
  problem: WorkingProblem; equations: NormalEquations; system: PenalisedSystem; search: PenaltySearch;
  constraints: ShapeConstraints; choose: (search: PenaltySearch) => boolean; held: Uint8Array;
};

function solveShaped(of: Shaped): WorkingSolution {
  const { problem, system, search, constraints, choose } = of;
  const held = of.held.slice();
  for (;;) {
    if (held.includes(1)) holdCurves(of, held);
    const rested = choose(search);
    search.problem = { system, layout: problem.layout, scale: problem.scale };
    evaluateAt(search, search.current.logPenalties.slice());
    const state = derivatives(search, "gradient");
    const free = estimates(system, state);
    const projected = projectOntoShape({ estimate: free.coordinates, covariance: coordinateCovariance(system, state) }, constraints, held);
    const { held: touched, estimate: coordinates } = projected;
    if (touched.every((value, at) => value <= held[at])) {
      const groupCoordinates = follow({ system, state, from: free.coordinates, to: coordinates, own: free.groupCoordinates });
      return { system, search, edf: edfOnFace(of, touched), coordinates, groupCoordinates, touched, held, rested };
    }
    touched.forEach((value, at) => { held[at] = Math.max(held[at], value); });
  }
}

/** Effective degrees of freedom under each penalty, at the penalties found, of the curves on the face they touch. */
function edfOnFace(of: Shaped, touched: Uint8Array): Float64Array {
  const { search, system, problem, constraints } = of;
  if (!touched.includes(1)) return search.current.edf.slice();
  const logPenalties = search.current.logPenalties.slice();
  holdCurves(of, touched);
  evaluateAt(search, logPenalties);
  const edf = derivatives(search, "gradient").edf.slice();
  // A curve that touches any constraint has no free line, which is counted elsewhere; held by a finite weight, a flat one
  // would come out a little below nothing.
  const lines = linesHeld(constraints, touched, { dropped: system.dropped.map(({ column }) => column), count: edf.length });
  heldPerPenalty(constraints, touched, edf.length).forEach((count, j) => { if (count > 0) edf[j] = Math.max(edf[j] - lines[j], -lines[j]); });
  search.problem = { system, layout: problem.layout, scale: problem.scale };
  evaluateAt(search, logPenalties);
  derivatives(search, "gradient");
  return edf;
}

/**
 * Points the search at the problem on the touched face: held constraints as a heavy penalty, which leaves each curve's own
 * penalty the coordinates that are still free; of a curve that touches any, the straight line is among the penalised.
 */
function holdCurves({ problem, equations, system, search, constraints }: Shaped, held: Uint8Array): void {
  const { design, layout, scale } = problem;
  const numbers = heldPerPenalty(constraints, held, layout.penalties.length);
  const onFace = createSystem(holdConstraints(equations, constraints, held), design, system.dropped);
  const lines = linesHeld(constraints, held, { dropped: system.dropped.map(({ column }) => column), count: numbers.length });
  const linesInAll = lines.reduce((sum, count) => sum + count, 0);
  search.problem = {
    scale,
    held: { perPenalty: numbers, unshaped: { system, layout, scale } },
    system: { ...onFace, unpenalisedKept: onFace.unpenalisedKept - linesInAll },
    layout: { ...layout, alone: layout.alone.map((rank, j) => rank + lines[j] - numbers[j]) },
  };
}

/** Groups' estimates given shared ones that moved: each by -K_g times the move. */
function follow(of: {
  system: PenalisedSystem; state: LikelihoodState; from: Float64Array; to: Float64Array; own: Float64Array | null;
}): Float64Array | null {
  const { system, state, from, to, own } = of;
  if (own === null || state.arrow === null || system.form !== "arrow") return own;
  const moved = own.slice();
  for (let row = 0; row < moved.length; row++) {
    for (let k = 0; k < from.length; k++) moved[row] -= state.arrow.link[row * from.length + k] * (to[k] - from[k]);
  }
  return moved;
}
