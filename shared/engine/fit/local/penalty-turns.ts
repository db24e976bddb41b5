import { planPenalties, refinePenalties, startPenalties, bestPenalties, maxSteps } from "../choose-penalties";
import type { PenaltyPlan } from "../choose-penalties";
import type { Design } from "../design";
import type { NormalEquations } from "../normal-equations";
import { layOutPenalties } from "../penalties";
import { evaluateAt } from "../penalty-search";
import type { PenaltySearch } from "../penalty-search";
import type { Scale } from "../restricted-likelihood";
import { solveWorking } from "../working-model";
import type { Before, WorkingProblem, WorkingSolution } from "../working-model";

/** Penalties of the terms beside local regressions, chosen in turn with the local curves. */
export type PenaltyTurns = {
  problem: WorkingProblem;
  /** Its degrees of freedom asked for are of the terms alone, set so that those of the joint fit become `wanted`. */
  plan: PenaltyPlan;
  wanted: number[];
  /** Whether any penalty is chosen or solved for, and the largest change of a log penalty in the last turn. */
  isFree: boolean;
  moved: number;
  turn: number;
  solution: WorkingSolution | null;
};

/** @example const turns = penaltyTurns(design, "unknown"); */
export function penaltyTurns(design: Design, scale: Scale): PenaltyTurns {
  const plan = planPenalties(design);
  return {
    problem: { design, plan, scale, layout: layOutPenalties(design.penalties, 1), constraints: null },
    plan,
    wanted: plan.asked.map(({ asked }) => asked),
    isFree: plan.automatic.length + plan.asked.length > 0,
    moved: Infinity, turn: 0, solution: null,
  };
}

/** Turns that search from two starts: the first begins at the defaults, and the curves settle in the next ones. */
const lastBroadTurn = 3;

/**
 * One turn: penalties by restricted likelihood of the response less the present local curves. The first stays at the
 * defaults, which gives the local curves something to be found beside.
 *
 * @param equations of the other terms, for the response less the curves.
 * @param turns `solution`, `moved` and `turn` are replaced.
 * @throws EngineError too-few-rows; smoothness-out-of-range where degrees of freedom cannot be had.
 */
export function takeTurn(turns: PenaltyTurns, equations: NormalEquations): WorkingSolution {
  const { plan, isFree } = turns;
  const before = turns.solution?.search.current.logPenalties.slice() ?? null;
  turns.turn++;
  turns.solution = solveWorking(turns.problem, equations, beforeOf(turns), (search) => {
    if (!isFree || before === null) return stay(search, startPenalties(search, plan, 0));
    if (turns.turn <= lastBroadTurn) return bestPenalties(search, plan);
    return refinePenalties(search, plan, { start: before, fellnerSchallSteps: 0, maxSteps }) === "rested";
  });
  const { logPenalties } = turns.solution.search.current;
  turns.moved = before === null ? Infinity : logPenalties.reduce((most, value, j) => Math.max(most, Math.abs(value - before[j])), 0);
  return turns.solution;
}

const nothing: Before = { dropped: null, search: null, held: null };

const beforeOf = ({ solution }: PenaltyTurns): Before =>
  (solution === null ? nothing : { dropped: solution.system.dropped, search: solution.search, held: null });

/** At given penalties, or, where these leave the system singular, the nearest larger ones. */
const stay = (search: PenaltySearch, start: Float64Array): boolean =>
  refinePenalties(search, { automatic: [], asked: [], given: [] }, { start, fellnerSchallSteps: 0, maxSteps: 0 }) === "rested";

/**
 * The terms at the penalties they have, beside the local curves found last: what criterion and warnings are read from.
 *
 * @param equations as for `takeTurn`.
 */
export function settle(turns: PenaltyTurns, equations: NormalEquations): WorkingSolution {
  const { rested } = turns.solution ?? { rested: false };
  const solution = solveWorking(turns.problem, equations, beforeOf(turns), (search) => {
    evaluateAt(search, search.current.logPenalties.slice());
    return rested;
  });
  return solution;
}

/**
 * Sets the degrees of freedom that terms have by themselves to those that give the joint fit what is asked for: the local
 * curves take part of what a term draws, so that its trace in the joint fit differs from the one alone.
 *
 * @param coordinateEdf trace of the joint fit per coordinate.
 * @returns by how much the joint fit still misses, at most.
 */
export function adjustAsked(turns: PenaltyTurns, coordinateEdf: Float64Array): number {
  const { plan: { asked }, problem: { design }, solution, turn } = turns;
  // The first turn is at the defaults.
  if (solution === null || turn === 1) return Infinity;
  let worst = 0;
  asked.forEach((term, at) => {
    const part = design.parts.find(({ id }) => id === term.id);
    if (part === undefined) return;
    const fixed = sumOver(part.positions, coordinateEdf, (position) => position < design.unpenalised);
    const joint = sumOver(part.positions, coordinateEdf, (position) => position >= design.unpenalised);
    const wanted = turns.wanted[at] - fixed;
    worst = Math.max(worst, Math.abs(wanted - joint));
    const { penalised } = part.coordinates;
    const place = logit((term.asked - fixed) / penalised) + logit(wanted / penalised) - logit(joint / penalised);
    term.asked = fixed + penalised / (1 + Math.exp(-place));
  });
  return worst;
}

const sumOver = (positions: Int32Array, values: Float64Array, isCounted: (position: number) => boolean): number =>
  positions.reduce((sum, position) => (isCounted(position) ? sum + values[position] : sum), 0);

/** A share of a penalty's coordinates, on a scale on which neither end can be passed. */
function logit(share: number): number {
  const inside = Math.min(Math.max(share, 1e-12), 1 - 1e-12);
  return Math.log(inside / (1 - inside));
}
