import type { Smoothness } from "../types";

/** One penalty of the model: its multiplier is chosen, asked for or given. */
export type Penalty = {
  id: string;
  smoothness: Smoothness;
  /** Penalised shared coordinates (or, where `grouped`, coordinates within one group's block) it covers. */
  start: number;
  end: number;
  /** Weight of each of them, all ones where null. */
  diagonal: Float64Array | null;
  grouped: boolean;
};

/** ln|S|+, with the derivatives by the log penalties it has in common with the fit's determinant. */
export type PenaltyDeterminant = {
  value: number;
  /** First derivatives: for a penalty alone on its coordinates their number. */
  ranks: Float64Array;
  /** Second derivatives, row-major; zero unless penalties share coordinates. */
  hessian: Float64Array;
};

/** Whether two penalties act on some of the same coordinates. */
const overlap = (left: Penalty, right: Penalty): boolean =>
  left.grouped === right.grouped && left.start < right.end && right.start < left.end;

/** Sets of penalties that share coordinates; the others are alone and have derivatives that do not change. */
export type PenaltyLayout = { penalties: readonly Penalty[]; alone: Float64Array; shared: number[][]; groupCount: number };

/**
 * Sorts a model's penalties into those alone on their coordinates and those that share them.
 *
 * @param groupCount how many groups a grouped penalty acts on.
 * @example layOutPenalties(design.penalties, 83).shared; // [[2, 3]] for a tensor product's two
 */
export function layOutPenalties(penalties: readonly Penalty[], groupCount: number): PenaltyLayout {
  const alone = new Float64Array(penalties.length);
  const shared: number[][] = [];
  penalties.forEach((penalty, j) => {
    const partners = penalties.flatMap((other, k) => (overlap(penalty, other) ? [k] : []));
    const isAlone = partners.length === 1 && (penalty.diagonal === null || penalty.diagonal.every((weight) => weight === 0 || weight === 1));
    if (isAlone) {
      const own = penalty.diagonal === null ? penalty.end - penalty.start : penalty.diagonal.reduce((sum, weight) => sum + weight, 0);
      alone[j] = own * (penalty.grouped ? groupCount : 1);
    } else if (partners[0] === j) shared.push(partners);
  });
  return { penalties, alone, shared, groupCount };
}

/** @example const determinant = createDeterminant(2); */
export const createDeterminant = (count: number): PenaltyDeterminant =>
  ({ value: 0, ranks: new Float64Array(count), hessian: new Float64Array(count * count) });

/**
 * Logarithm of the product of the non-zero diagonal entries of S = sum of multiplier x penalty, and its derivatives.
 * A coordinate with entry t = sum_j l_j d_j adds ln t, l_j d_j / t to rank j, and
 * [j = k] l_j d_j / t - l_j d_j l_k d_k / t^2 to the second derivatives (Wood 2011, section 3.1, for diagonal penalties).
 *
 * @param out overwritten.
 * @example penaltyDeterminant(layout, Float64Array.of(0), out); // out.value: 0
 */
export function penaltyDeterminant(layout: PenaltyLayout, logPenalties: Float64Array, out: PenaltyDeterminant): void {
  const { penalties, alone, shared, groupCount } = layout;
  let value = 0;
  for (let j = 0; j < penalties.length; j++) {
    value += alone[j] * logPenalties[j];
    out.ranks[j] = alone[j];
  }
  out.value = value;
  if (shared.length === 0) return;
  out.hessian.fill(0);
  for (const set of shared) addSharedSet(penalties, set, { logPenalties, out, times: penalties[set[0]].grouped ? groupCount : 1 });
}

function addSharedSet(
  penalties: readonly Penalty[], set: readonly number[],
  at: { logPenalties: Float64Array; out: PenaltyDeterminant; times: number },
): void {
  const { logPenalties, out, times } = at;
  const count = penalties.length;
  const start = Math.min(...set.map((j) => penalties[j].start));
  const end = Math.max(...set.map((j) => penalties[j].end));
  for (let coordinate = start; coordinate < end; coordinate++) {
    const shares = set.map((j) => Math.exp(logPenalties[j]) * weightAt(penalties[j], coordinate));
    const total = shares.reduce((sum, share) => sum + share, 0);
    if (!(total > 0)) continue;
    out.value += times * Math.log(total);
    set.forEach((j, a) => {
      const own = shares[a] / total;
      out.ranks[j] += times * own;
      out.hessian[j * count + j] += times * own;
      set.forEach((k, b) => { out.hessian[j * count + k] -= times * own * (shares[b] / total); });
    });
  }
}

/** Weight of a penalty on a coordinate counted as its `start` and `end` are. */
export function weightAt({ start, end, diagonal }: Penalty, coordinate: number): number {
  if (coordinate < start || coordinate >= end) return 0;
  return diagonal === null ? 1 : diagonal[coordinate - start];
}
