import { rowProducts } from "../linalg/tiles";
import type { ArrowState, ArrowSystem } from "./arrow-system";
import type { LikelihoodState } from "./likelihood-state";
import type { Penalty } from "./penalties";
import { weightAt } from "./penalties";

/**
 * Positions of the penalties on groups.
 *
 * @example groupedOnly(penalties); // [2, 3, 4]
 */
export const groupedOnly = (penalties: readonly Penalty[]): number[] => penalties.flatMap(({ grouped }, j) => (grouped ? [j] : []));

/**
 * Adds products over one group's coordinates, weighted by every pair of penalties, to the lower triangle of norms and forms.
 *
 * @param of.norms row-major size x size. of.forms likewise, or null. Not changed.
 * @example addWeighted({ penalties, own: groupedOnly(penalties), size, norms, forms: null }, state);
 */
export function addWeighted(
  of: { penalties: readonly Penalty[]; own: readonly number[]; size: number; norms: Float64Array; forms: Float64Array | null },
  state: LikelihoodState,
): void {
  const { penalties, own, size, norms, forms } = of;
  for (const j of own) {
    for (const k of own) {
      if (k > j) continue;
      const at = j * penalties.length + k;
      for (let c = 0; c < size; c++) {
        for (let e = 0; e < size; e++) {
          const weight = weightAt(penalties[j], c) * weightAt(penalties[k], e);
          if (weight === 0) continue;
          state.norms[at] += weight * norms[c * size + e];
          if (forms !== null) state.forms[at] += weight * forms[c * size + e];
        }
      }
    }
  }
}

/**
 * Squares of K_g M^-1 K_h' over all pairs of groups, a group with itself included, added to the norms of grouped penalties.
 *
 * @param state at level gradient.
 * @example addBetweenGroups(system, penalties, state);
 */
export function addBetweenGroups(system: ArrowSystem, penalties: readonly Penalty[], state: LikelihoodState): void {
  const { size: shared, groups: { count, size } } = system;
  const own = groupedOnly(penalties);
  const rows = count * size;
  if (rows < 2 * shared) addWeighted({ penalties, own, size, norms: directSquares(system, state), forms: null }, state);
  else addBySums({ system, penalties, own }, state);
}

function directSquares(system: ArrowSystem, state: LikelihoodState): Float64Array {
  const { size: width, groups: { count, size } } = system;
  const { link, spread } = state.arrow as ArrowState;
  const rows = count * size;
  const between = new Float64Array(rows * rows);
  rowProducts({ values: spread, count: rows, width }, { values: link, count: rows, width }, between, true);
  const squares = new Float64Array(size * size);
  for (let row = 0; row < rows; row++) {
    for (let other = 0; other <= row; other++) {
      const square = between[row * rows + other] ** 2;
      squares[(row % size) * size + (other % size)] += square;
      if (other < row) squares[(other % size) * size + (row % size)] += square;
    }
  }
  return squares;
}

function addBySums(of: { system: ArrowSystem; penalties: readonly Penalty[]; own: readonly number[] }, state: LikelihoodState): void {
  const { system: { size: shared, groups: { count, size } }, penalties, own } = of;
  const { link, spread } = state.arrow as ArrowState;
  // M^-1 T = sum over rows of (K M^-1)' d K: no further product is needed.
  const products = own.map((j) => {
    const product = new Float64Array(shared * shared);
    for (let k = 0; k < size; k++) {
      const weight = weightAt(penalties[j], k);
      if (weight === 0) continue;
      for (let group = 0; group < count; group++) {
        const from = (group * size + k) * shared;
        for (let i = 0; i < shared; i++) {
          const value = weight * spread[from + i];
          for (let column = 0; column < shared; column++) product[i * shared + column] += value * link[from + column];
        }
      }
    }
    return product;
  });
  own.forEach((j, a) => {
    for (let b = 0; b <= a; b++) {
      let trace = 0;
      for (let row = 0; row < shared; row++) {
        for (let column = 0; column < shared; column++) trace += products[a][row * shared + column] * products[b][column * shared + row];
      }
      state.norms[j * penalties.length + own[b]] += trace;
    }
  });
}
