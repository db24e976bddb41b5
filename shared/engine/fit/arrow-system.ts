import { backwardSolve, choleskyInPlace, forwardSolve, logDeterminant } from "../linalg/cholesky";
import { subtractSquare } from "../linalg/tiles";
import { ownShareNeeded } from "../linalg/dropping-cholesky";
import type { DroppedColumn } from "../linalg/dropping-cholesky";
import { addPenalty } from "./dense-system";
import type { SystemParts } from "./dense-system";
import { factorUnpenalised } from "./eliminate-unpenalised";
import type { LikelihoodState } from "./likelihood-state";
import type { GroupEquations } from "./group-equations";
import type { NormalEquations } from "./normal-equations";
import type { Penalty } from "./penalties";
import { weightAt } from "./penalties";

/**
 * The least-squares problem of a model with terms on groups. Groups meet only the shared coordinates, so its matrix is a
 * bordered block-diagonal one ("arrow"): each group is eliminated by itself, M = A - sum_g C_g'(B_g + S_g)^-1 C_g, and
 * solving, log-determinant, traces and their derivatives are linear in the number of groups.
 * Its coordinates are the shared ones, unpenalised first; `matrix` is A, lower triangle, dropped columns the identity's.
 * Source: Golub & Van Loan (1996), section 4.2 and 3.2 (block elimination, partitioned inverse).
 */
export type ArrowSystem = SystemParts & {
  form: "arrow";
  groups: GroupEquations;
  /** Mean diagonal of the groups' blocks per own coordinate. */
  groupDiagonal: Float64Array;
  /** Per unpenalised coordinate, what elimination must leave of its diagonal: less is rounding, as for columns that are dropped. */
  leastPivots: Float64Array;
};

/** What elimination leaves per group, one group after the other. */
export type ArrowState = {
  /** Factor L_g of B_g + S_g; from level gradient its inverse (B_g + S_g)^-1, row-major. */
  inner: Float64Array;
  /** L_g^-1 C_g; from level gradient K_g = (B_g + S_g)^-1 C_g. Row-major, size x shared size. */
  link: Float64Array;
  /** K_g M^-1. */
  spread: Float64Array;
  /** L_g^-1 c_g; from level gradient the group's estimates. */
  coefficients: Float64Array;
};

/** @example createArrowState(groups, 24); */
export function createArrowState({ count, size }: { count: number; size: number }, sharedSize: number): ArrowState {
  return {
    inner: new Float64Array(count * size * size),
    link: new Float64Array(count * size * sharedSize),
    spread: new Float64Array(count * size * sharedSize),
    coefficients: new Float64Array(count * size),
  };
}

/**
 * Prepares a model with groups for trials of its penalties: decides which unpenalised columns earlier ones reproduce.
 *
 * @param known columns dropped before on the same design, or null to decide.
 * @example const system = arrowSystem(equations, equations.groups, { unpenalised: 3, size: 20, rowCount: 9649 }, null);
 */
export function arrowSystem(
  equations: NormalEquations, groups: GroupEquations,
  layout: { unpenalised: number; size: number; rowCount: number }, known: DroppedColumn[] | null,
): ArrowSystem {
  const { unpenalised, size, rowCount } = layout;
  const { dropped } = factorUnpenalised(equations, layout, known);
  const matrix = equations.matrix.slice();
  const vector = equations.vector.slice();
  const cross = groups.cross.slice();
  const diagonal = new Float64Array(size);
  for (let k = 0; k < size; k++) diagonal[k] = matrix[k * (size + 1)];
  for (const { column } of dropped) {
    for (let k = 0; k < size; k++) matrix[Math.max(k, column) * size + Math.min(k, column)] = k === column ? 1 : 0;
    vector[column] = 0;
    for (let row = column; row < cross.length; row += size) cross[row] = 0;
  }
  return {
    form: "arrow", size, unpenalised, matrix, vector, diagonal, rowCount, dropped,
    groups: { ...groups, cross },
    groupDiagonal: meanDiagonal(groups),
    leastPivots: Float64Array.from({ length: unpenalised }, (_, k) => ownShareNeeded * matrix[k * (size + 1)]),
    total: equations.total, yardstick: equations.total, logDeterminant: 0,
    unpenalisedKept: unpenalised - dropped.length,
  };
}

function meanDiagonal({ own, count, size }: GroupEquations): Float64Array {
  const means = new Float64Array(size);
  for (let group = 0; group < count; group++) {
    for (let k = 0; k < size; k++) means[k] += own[(group * size + k) * size + k] / count;
  }
  return means;
}

/** Multiplier-weighted diagonal of the penalties on one group's coordinates. */
function groupPenalty(penalties: readonly Penalty[], multipliers: Float64Array, size: number): Float64Array {
  const sum = new Float64Array(size);
  penalties.forEach((penalty, j) => {
    if (!penalty.grouped) return;
    for (let k = 0; k < size; k++) sum[k] += multipliers[j] * weightAt(penalty, k);
  });
  return sum;
}

/**
 * Shared estimates, log-determinant and penalised residual at the state's multipliers.
 * O(groups x size x shared^2 / 2 + shared^3 / 6).
 *
 * @returns false where the penalised system is singular.
 */
export function solveArrow(system: ArrowSystem, penalties: readonly Penalty[], state: LikelihoodState): boolean {
  const { size, unpenalised } = system;
  const { factor, coefficients, multipliers } = state;
  factor.set(system.matrix);
  coefficients.set(system.vector);
  const eliminated = eliminateGroups(system, groupPenalty(penalties, multipliers, system.groups.size), state);
  if (eliminated === null) return false;
  for (let j = 0; j < penalties.length; j++) {
    if (!penalties[j].grouped) addPenalty(shifted(penalties[j], unpenalised), multipliers[j], factor, size);
  }
  if (!choleskyInPlace(factor, size, system.leastPivots)) return false;
  forwardSolve(factor, size, coefficients);
  let { explained } = eliminated;
  for (let k = 0; k < size; k++) explained += coefficients[k] * coefficients[k];
  backwardSolve(factor, size, coefficients);
  state.logDeterminant = eliminated.logDeterminant + logDeterminant(factor, size);
  state.penalisedResidual = system.total - explained;
  return true;
}

const shifted = (penalty: Penalty, by: number): Penalty => ({ ...penalty, start: penalty.start + by, end: penalty.end + by });

function eliminateGroups(
  system: ArrowSystem, penalty: Float64Array, state: LikelihoodState,
): { logDeterminant: number; explained: number } | null {
  const { groups: { count, size, own, cross, vector }, size: shared } = system;
  const { inner, link, coefficients: solved } = state.arrow as ArrowState;
  inner.set(own);
  link.set(cross);
  solved.set(vector);
  let determinant = 0;
  let explained = 0;
  for (let group = 0; group < count; group++) {
    const block = inner.subarray(group * size * size, (group + 1) * size * size);
    for (let k = 0; k < size; k++) block[k * (size + 1)] += penalty[k];
    if (!choleskyInPlace(block, size)) return null;
    determinant += logDeterminant(block, size);
    const rows = link.subarray(group * size * shared, (group + 1) * size * shared);
    const right = solved.subarray(group * size, (group + 1) * size);
    forwardSolveRows(block, size, rows, shared);
    forwardSolve(block, size, right);
    for (let k = 0; k < size; k++) explained += right[k] * right[k];
    subtractVector({ rows, right, shared }, state.coefficients);
  }
  subtractSquare({ values: link, count: count * size, width: shared }, state.factor);
  return { logDeterminant: determinant, explained };
}

/** L^-1 applied to `size` rows of length `width`, in place. */
function forwardSolveRows(factor: Float64Array, size: number, rows: Float64Array, width: number): void {
  for (let row = 0; row < size; row++) {
    const to = row * width;
    for (let k = 0; k < row; k++) {
      const weight = factor[row * size + k];
      for (let column = 0; column < width; column++) rows[to + column] -= weight * rows[k * width + column];
    }
    const reciprocal = 1 / factor[row * size + row];
    for (let column = 0; column < width; column++) rows[to + column] *= reciprocal;
  }
}

/** Takes the group's part off the shared vector. */
function subtractVector({ rows, right, shared }: { rows: Float64Array; right: Float64Array; shared: number }, vector: Float64Array): void {
  for (let k = 0; k < right.length; k++) {
    const value = right[k];
    for (let i = 0; i < shared; i++) vector[i] -= value * rows[k * shared + i];
  }
}
