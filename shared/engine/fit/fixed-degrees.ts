import { EngineError } from "../errors";
import type { PenaltySearch } from "./penalty-search";
import { evaluateAt } from "./penalty-search";
import type { ReducedSystem } from "./reduced-system";

/** Log units beyond the default in which a penalty for given degrees of freedom is looked for. */
const reach = 30;
const tolerance = 1e-10;

/** Penalised degrees of freedom that block's term is asked for: its own less those of its unpenalised coordinates. */
function wantedEdf(search: PenaltySearch, reduced: ReducedSystem, block: number, firstUnpenalised: number): number {
  const { smoothness, unpenalised } = search.blocks[block];
  if (typeof smoothness === "string" || !("df" in smoothness)) return 0;
  const dropped = reduced.dropped.filter(({ column }) => column >= firstUnpenalised && column < firstUnpenalised + unpenalised).length;
  return smoothness.df - (unpenalised - dropped);
}

/**
 * Moves the penalty of each block of given degrees of freedom to where its trace in the joint fit equals the number asked
 * for: Newton within a bracket, block by block until all hold. The trace falls as the penalty rises (Hastie & Tibshirani
 * 1990, section 5.4.5).
 *
 * @param fixed blocks and the first unpenalised coordinate of each one's term.
 * @throws EngineError smoothness-out-of-range where the data's values allow fewer than asked.
 * @example solveDegrees(search, reduced, [{ block: 0, firstUnpenalised: 1 }]);
 */
export function solveDegrees(
  search: PenaltySearch, reduced: ReducedSystem, fixed: readonly { block: number; firstUnpenalised: number }[],
): void {
  for (let sweep = 0; sweep < 50; sweep++) {
    let worst = 0;
    for (const { block, firstUnpenalised } of fixed) {
      const wanted = wantedEdf(search, reduced, block, firstUnpenalised);
      worst = Math.max(worst, Math.abs(search.current.edf[block] - wanted));
      if (Math.abs(search.current.edf[block] - wanted) > tolerance) solveOne(search, reduced, block, wanted);
    }
    if (worst <= tolerance) return;
  }
}

function solveOne(search: PenaltySearch, reduced: ReducedSystem, block: number, wanted: number): void {
  const count = search.blocks.length;
  let low = search.defaults[block] - reach;
  let high = search.defaults[block] + reach;
  const logPenalties = search.current.logPenalties.slice();
  for (let step = 0; step < 200 && high - low > 1e-13; step++) {
    const excess = search.current.edf[block] - wanted;
    if (!Number.isFinite(search.current.criterion) || excess > 0) low = Math.max(low, logPenalties[block]);
    else high = Math.min(high, logPenalties[block]);
    if (Math.abs(excess) <= tolerance / 10) return;
    const slope = -search.current.determinantHessian[block * count + block];
    const newton = logPenalties[block] - excess / slope;
    const isInside = newton > low && newton < high && Number.isFinite(search.current.criterion);
    logPenalties[block] = isInside ? newton : (low + high) / 2;
    evaluateAt(search, reduced, logPenalties);
  }
  if (Math.abs(search.current.edf[block] - wanted) > 1e-6) refuse(search, block, wanted);
}

function refuse(search: PenaltySearch, block: number, wanted: number): never {
  const { id, smoothness } = search.blocks[block];
  const asked = typeof smoothness === "object" && "df" in smoothness ? smoothness.df : wanted;
  const reached = asked - wanted + search.current.edf[block];
  throw new EngineError(
    "smoothness-out-of-range",
    `Term "${id}": df is ${asked}, which these data cannot give; the nearest the term comes to is ${reached.toFixed(2)}.`,
  );
}
