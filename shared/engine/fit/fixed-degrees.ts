import { EngineError } from "../errors";
import type { PenaltySearch } from "./penalty-search";
import { derivatives, evaluateAt } from "./penalty-search";

/** Log units beyond the default in which a penalty for given degrees of freedom is looked for. */
const reach = 30;
const tolerance = 1e-10;
/** A sweep that leaves more than this share of the worst excess shows that rounding is all that is left. */
const stalled = 0.9;

/** Penalties of one term that is asked for degrees of freedom, and how many of them its unpenalised coordinates take. */
export type AskedTerm = { id: string; penalties: number[]; asked: number; firstUnpenalised: number; unpenalised: number };

/** Effective degrees of freedom wanted under the term's penalties: what is asked for less its unpenalised coordinates. */
function wantedEdf(search: PenaltySearch, term: AskedTerm): number {
  const { firstUnpenalised, unpenalised } = term;
  const { dropped } = search.problem.system;
  const left = dropped.filter(({ column }) => column >= firstUnpenalised && column < firstUnpenalised + unpenalised).length;
  return term.asked - (unpenalised - left);
}

const edfOf = (search: PenaltySearch, { penalties }: AskedTerm): number => {
  const { edf, criterion } = derivatives(search, "hessian");
  return Number.isFinite(criterion) ? penalties.reduce((sum, j) => sum + edf[j], 0) : Infinity;
};

/**
 * Moves the penalty of each term of given degrees of freedom to where its trace in the joint fit equals the number asked
 * for: Newton within a bracket, term by term until all hold; a term's several penalties move together. The trace falls as
 * the penalty rises (Hastie & Tibshirani 1990, section 5.4.5). A curve that its shape holds is asked by its trace without the
 * shape: on the face it touches it may not have as many, and spends what it can.
 *
 * @throws EngineError smoothness-out-of-range where the data's values allow fewer than asked.
 * @example solveDegrees(search, plan.asked);
 */
export function solveDegrees(search: PenaltySearch, asked: readonly AskedTerm[]): void {
  const { problem } = search;
  const { held } = problem;
  const isHeld = ({ penalties }: AskedTerm) => held !== undefined && penalties.some((penalty) => held.perPenalty[penalty] > 0);
  const shaped = asked.filter(isHeld);
  if (held !== undefined && shaped.length > 0) {
    search.problem = held.unshaped;
    evaluateAt(search, search.current.logPenalties.slice());
    sweep(search, shaped);
    search.problem = problem;
    evaluateAt(search, search.current.logPenalties.slice());
  }
  sweep(search, asked.filter((term) => !isHeld(term)));
}

function sweep(search: PenaltySearch, asked: readonly AskedTerm[]): void {
  let before = Infinity;
  for (let turn = 0; turn < 50; turn++) {
    let worst = 0;
    for (const term of asked) {
      const wanted = wantedEdf(search, term);
      const excess = Math.abs(edfOf(search, term) - wanted);
      worst = Math.max(worst, excess);
      if (excess > tolerance) solveOne(search, term, wanted);
    }
    if (worst <= tolerance || (turn > (asked.length === 1 ? 1 : 5) && worst > stalled * before)) return;
    before = worst;
  }
}

function solveOne(search: PenaltySearch, term: AskedTerm, wanted: number): void {
  const start = search.current.logPenalties.slice();
  const { penalties } = term;
  const middle = penalties.reduce((sum, j) => sum + search.defaults[j] - start[j], 0) / penalties.length;
  let low = middle - reach;
  let high = middle + reach;
  let shift = 0;
  for (let step = 0; step < 200 && high - low > 1e-13; step++) {
    const excess = edfOf(search, term) - wanted;
    if (excess > 0) low = Math.max(low, shift);
    else high = Math.min(high, shift);
    if (Math.abs(excess) <= tolerance / 10) return;
    const newton = shift - excess / slopeOf(search, penalties);
    shift = newton > low && newton < high ? newton : (low + high) / 2;
    const logPenalties = start.slice();
    for (const j of penalties) logPenalties[j] += shift;
    evaluateAt(search, logPenalties);
  }
  if (Math.abs(edfOf(search, term) - wanted) > 1e-6) refuse(search, term, wanted);
}

/** Change of the term's effective degrees of freedom as all its log penalties rise together. */
function slopeOf(search: PenaltySearch, penalties: readonly number[]): number {
  const count = search.penalties.length;
  let slope = 0;
  for (const j of penalties) for (const k of penalties) slope -= search.current.determinantHessian[j * count + k];
  return slope;
}

function refuse(search: PenaltySearch, term: AskedTerm, wanted: number): never {
  const reached = term.asked - wanted + edfOf(search, term);
  throw new EngineError(
    "smoothness-out-of-range",
    `Term "${term.id}": df is ${term.asked}, which these data cannot give; the nearest the term comes to is ${reached.toFixed(2)}.`,
  );
}
