import { backwardSolve, invertFactored } from "../linalg/cholesky";
import { rowProducts } from "../linalg/tiles";
import type { ArrowState, ArrowSystem } from "./arrow-system";
import { traceOwn } from "./dense-system";
import type { LikelihoodState } from "./likelihood-state";
import type { Penalty } from "./penalties";
import { weightAt } from "./penalties";

/**
 * Inverse of the shared part, K_g, K_g M^-1, the groups' estimates, squares and traces. O(groups x size x shared^2).
 *
 * @param state at level criterion; its factors are spent.
 */
export function traceArrow(system: ArrowSystem, penalties: readonly Penalty[], state: LikelihoodState): void {
  const { size: shared, unpenalised, groups: { count, size } } = system;
  const arrow = state.arrow as ArrowState;
  invertFactored(state.factor, shared, state.inverse);
  const traces = new Float64Array(size);
  const squares = new Float64Array(size);
  const factor = new Float64Array(size * size);
  for (let group = 0; group < count; group++) goBack({ state, arrow, group, size, shared, factor });
  const { link, spread } = arrow;
  const links = { values: link, count: count * size, width: shared };
  rowProducts(links, { values: state.inverse, count: shared, width: shared }, spread);
  for (let group = 0; group < count; group++) {
    for (let k = 0; k < size; k++) {
      const at = (group * size + k) * shared;
      let variance = arrow.inner[(group * size + k) * size + k];
      for (let i = 0; i < shared; i++) variance += link[at + i] * spread[at + i];
      traces[k] += variance;
      squares[k] += arrow.coefficients[group * size + k] ** 2;
    }
  }
  penalties.forEach((penalty, j) => {
    if (!penalty.grouped) return traceOwn(penalty, { state, size: shared, offset: unpenalised, j });
    state.traces[j] = 0;
    state.squares[j] = 0;
    for (let k = 0; k < size; k++) {
      const weight = weightAt(penalty, k);
      state.traces[j] += weight * traces[k];
      state.squares[j] += weight * squares[k];
    }
  });
}

/** One group: K_g = L^-T (L^-1 C_g), its estimates and (B_g + S_g)^-1. */
function goBack(of: { state: LikelihoodState; arrow: ArrowState; group: number; size: number; shared: number; factor: Float64Array }): void {
  const { state: { coefficients }, arrow, group, size, shared, factor } = of;
  const block = arrow.inner.subarray(group * size * size, (group + 1) * size * size);
  const rows = arrow.link.subarray(group * size * shared, (group + 1) * size * shared);
  const own = arrow.coefficients.subarray(group * size, (group + 1) * size);
  backwardSolveRows(block, size, rows, shared);
  backwardSolve(block, size, own);
  factor.set(block);
  invertFactored(factor, size, block);
  for (let k = 0; k < size; k++) {
    let estimate = own[k];
    for (let i = 0; i < shared; i++) estimate -= rows[k * shared + i] * coefficients[i];
    own[k] = estimate;
  }
}

function backwardSolveRows(factor: Float64Array, size: number, rows: Float64Array, width: number): void {
  for (let row = size - 1; row >= 0; row--) {
    const to = row * width;
    for (let k = row + 1; k < size; k++) {
      const weight = factor[k * size + row];
      for (let column = 0; column < width; column++) rows[to + column] -= weight * rows[k * width + column];
    }
    const reciprocal = 1 / factor[row * size + row];
    for (let column = 0; column < width; column++) rows[to + column] *= reciprocal;
  }
}
