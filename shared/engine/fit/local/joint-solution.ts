import { quoted } from "../../basis/columns";
import { EngineError } from "../../errors";
import { addProduct } from "../../linalg/dense-product";
import type { PivotedLu } from "../../linalg/pivoted-lu";
import { pivotedLu, solveLu } from "../../linalg/pivoted-lu";
import type { Penalty } from "../penalties";
import { weightAt } from "../penalties";
import type { JointSystem } from "./joint-system";

/** Of rows scaled to one, a pivot below this is rounding. */
const smallestPivot = 1e-12;

/** The joint system at given penalties. */
export type JointSolution = {
  system: JointSystem;
  lu: PivotedLu;
  /** Per fixed coordinate, what penalties add to the diagonal. */
  penalty: Float64Array;
  /** Joint unknowns: coordinates (zero for dropped ones), then pooled values. */
  unknowns: Float64Array;
  /** Per joint unknown of a local regression, the centred curve at its distinct point; zero for coordinates. */
  curves: Float64Array;
  /** What the local regressions add to the model's level. */
  level: number;
};

/**
 * Penalties' diagonal over the coordinates of a model without terms on groups.
 *
 * @param multipliers per penalty.
 * @example penaltyDiagonal(design, search.current.multipliers);
 */
export function penaltyDiagonal(
  design: { penalties: readonly Penalty[]; unpenalised: number; size: number }, multipliers: Float64Array,
): Float64Array {
  const diagonal = new Float64Array(design.size);
  design.penalties.forEach((penalty, j) => {
    for (let k = penalty.start; k < penalty.end; k++) diagonal[design.unpenalised + k] += multipliers[j] * weightAt(penalty, k);
  });
  return diagonal;
}

/**
 * Solves the joint system. O(size^3 / 3), size being the unknowns that are left.
 *
 * @param penalty per fixed coordinate.
 * @throws EngineError spec-invalid where terms and local regressions cannot be told apart.
 * @example solveJoint(system, penaltyDiagonal(design, multipliers)).curves;
 */
export function solveJoint(system: JointSystem, penalty: Float64Array): JointSolution {
  const { layout: { size: all, locals }, operators, size, below, cross, vector } = system;
  const matrix = system.matrix.slice();
  for (let k = 0; k < penalty.length; k++) matrix[k * (size + 1)] += penalty[k];
  const lu = pivotedLu(matrix, size);
  if (!(lu.smallestPivot > smallestPivot)) refuse(system);
  const unknowns = new Float64Array(all);
  unknowns.set(solveLu(lu, system.reduced, 1));
  const last = unknowns.subarray(size);
  for (let k = 0; k < last.length; k++) last[k] = vector[size + k] / cross[(size + k) * (all + 1)];
  addProduct({ values: below, count: last.length, width: size }, { values: unknowns.slice(0, size), count: size, width: 1 }, -1, last);
  const curves = new Float64Array(all);
  locals.forEach(({ first, count }, at) => {
    const pooled = { values: unknowns.slice(first, first + count), count, width: 1 };
    addProduct({ values: operators[at].centred, count, width: count }, pooled, 1, curves.subarray(first, first + count));
  });
  const level = system.level.reduce((sum, share, k) => sum + share * unknowns[k], 0);
  return { system, lu, penalty, unknowns, curves, level };
}

function refuse({ layout: { locals } }: JointSystem): never {
  throw new EngineError(
    "spec-invalid",
    `The terms beside the local regression ${quoted(locals.map(({ id }) => id))} cannot be told apart from it in these rows; leave one out, or use a smooth in its place.`,
  );
}
