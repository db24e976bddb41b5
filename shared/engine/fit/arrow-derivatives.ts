import { addBetweenGroups, addWeighted, groupedOnly } from "./arrow-between";
import type { ArrowState, ArrowSystem } from "./arrow-system";
import { pairProducts } from "./dense-system";
import type { LikelihoodState } from "./likelihood-state";
import type { Penalty } from "./penalties";
import { weightAt } from "./penalties";

/**
 * b'D_j H^-1 D_k b and tr(H^-1 D_j H^-1 D_k) for every pair of penalties of a model with groups, from K_g, K_g M^-1 and
 * (B_g + S_g)^-1. With v = D b on shared coordinates, -sum_g K_g'(D b)_g for grouped penalties, the form is v_j'M^-1 v_k,
 * plus sum_g (D_j b)_g'(B_g + S_g)^-1 (D_k b)_g where both are grouped. Of the inverse's blocks between two groups,
 * K_g M^-1 K_h', the squares are summed as tr(M^-1 T_j M^-1 T_k), T = sum_g K_g'D K_g, or directly where that is less work.
 *
 * @param state at level gradient; `forms` and `norms` are overwritten.
 */
export function crossArrow(system: ArrowSystem, penalties: readonly Penalty[], state: LikelihoodState): void {
  const { size, unpenalised } = system;
  const count = penalties.length;
  const vectors = penalties.map((penalty) => sharedVector(system, penalty, state));
  for (let j = 0; j < count; j++) {
    const solved = times(state.inverse, vectors[j], rangeOf(system, penalties[j]));
    for (let k = 0; k <= j; k++) {
      const at = j * count + k;
      const [left, right] = [penalties[j], penalties[k]];
      if (!left.grouped && !right.grouped) pairProducts(left, right, { state, size, offset: unpenalised, at });
      else {
        state.norms[at] = left.grouped && right.grouped ? 0 : mixedNorm(system, left.grouped ? [right, left] : [left, right], state);
        state.forms[at] = dot(solved, vectors[k]);
      }
    }
  }
  addWithinGroups(system, penalties, state);
  addBetweenGroups(system, penalties, state);
  for (let j = 0; j < count; j++) {
    for (let k = 0; k < j; k++) {
      state.forms[k * count + j] = state.forms[j * count + k];
      state.norms[k * count + j] = state.norms[j * count + k];
    }
  }
}

function sharedVector(system: ArrowSystem, penalty: Penalty, state: LikelihoodState): Float64Array {
  const { size: shared, unpenalised, groups: { count, size } } = system;
  const { link, coefficients } = state.arrow as ArrowState;
  const vector = new Float64Array(shared);
  if (!penalty.grouped) {
    for (let k = penalty.start; k < penalty.end; k++) vector[unpenalised + k] = weightAt(penalty, k) * state.coefficients[unpenalised + k];
    return vector;
  }
  for (let k = penalty.start; k < penalty.end; k++) {
    const weight = weightAt(penalty, k);
    if (weight === 0) continue;
    for (let group = 0; group < count; group++) {
      const row = group * size + k;
      const value = weight * coefficients[row];
      for (let i = 0; i < shared; i++) vector[i] -= value * link[row * shared + i];
    }
  }
  return vector;
}

/** Shared coordinates where a penalty's vector is not zero. */
const rangeOf = ({ size, unpenalised }: ArrowSystem, { grouped, start, end }: Penalty): { from: number; to: number } =>
  (grouped ? { from: 0, to: size } : { from: unpenalised + start, to: unpenalised + end });

/** A symmetric matrix times a vector that is zero outside `from` to `to`. */
function times(matrix: Float64Array, vector: Float64Array, { from, to }: { from: number; to: number }): Float64Array {
  const size = vector.length;
  const out = new Float64Array(size);
  for (let k = from; k < to; k++) {
    const value = vector[k];
    for (let column = 0; column < size; column++) out[column] += value * matrix[k * size + column];
  }
  return out;
}

function dot(left: Float64Array, right: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < left.length; k++) sum += left[k] * right[k];
  return sum;
}

/** Squares of the inverse between one shared penalty's coordinates and a grouped one's: entries of K_g M^-1. */
function mixedNorm(system: ArrowSystem, [shared, grouped]: [Penalty, Penalty], state: LikelihoodState): number {
  const { size: width, unpenalised, groups: { count, size } } = system;
  const { spread } = state.arrow as ArrowState;
  let total = 0;
  for (let k = grouped.start; k < grouped.end; k++) {
    const weight = weightAt(grouped, k);
    if (weight === 0) continue;
    for (let group = 0; group < count; group++) {
      const from = (group * size + k) * width + unpenalised;
      let sum = 0;
      for (let i = shared.start; i < shared.end; i++) {
        const own = shared.diagonal === null ? 1 : shared.diagonal[i - shared.start];
        sum += own * spread[from + i] * spread[from + i];
      }
      total += weight * sum;
    }
  }
  return total;
}

/** Per group (Bi + X)^2 - X^2, X = K_g M^-1 K_g', and the forms' part with Bi = (B_g + S_g)^-1. */
function addWithinGroups(system: ArrowSystem, penalties: readonly Penalty[], state: LikelihoodState): void {
  const { size: shared, groups: { count, size } } = system;
  const { inner, link, spread, coefficients } = state.arrow as ArrowState;
  const own = groupedOnly(penalties);
  const norms = new Float64Array(size * size);
  const forms = new Float64Array(size * size);
  for (let group = 0; group < count; group++) {
    for (let c = 0; c < size; c++) {
      const row = group * size + c;
      for (let e = 0; e < size; e++) {
        const column = group * size + e;
        let across = 0;
        for (let i = 0; i < shared; i++) across += spread[row * shared + i] * link[column * shared + i];
        const within = inner[row * size + e];
        norms[c * size + e] += within * (within + 2 * across);
        forms[c * size + e] += coefficients[row] * within * coefficients[column];
      }
    }
  }
  addWeighted({ penalties, own, size, norms, forms }, state);
}
