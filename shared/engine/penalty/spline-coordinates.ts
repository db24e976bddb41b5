import type { LevelledSmoothBasis } from "../types";
import { ridgeCoordinates } from "./coordinates";
import type { TermCoordinates } from "./coordinates";
import { identityTransform } from "./difference-penalty";

/**
 * A curve of `size` splines without its constant: the line first (none on a circle), then the wiggly coordinates.
 *
 * @example splineCoordinates(10, false).penalised; // 8
 */
export function splineCoordinates(size: number, wraps: boolean): TermCoordinates {
  const { matrix, unpenalised, penalised } = identityTransform(size, wraps);
  return ridgeCoordinates({ form: "dense", matrix }, size, { unpenalised, penalised });
}

/**
 * A curve that multiplies a column of numbers: its constant is no other term's, so it comes first.
 *
 * @example scaledCoordinates(10).unpenalised; // 2
 */
export function scaledCoordinates(size: number): TermCoordinates {
  const { matrix: without, penalised } = identityTransform(size, false);
  const matrix = new Float64Array(size * size);
  for (let row = 0; row < size; row++) {
    matrix[row * size] = 1;
    matrix.set(without.subarray(row * (size - 1), (row + 1) * (size - 1)), row * size + 1);
  }
  return ridgeCoordinates({ form: "dense", matrix }, size, { unpenalised: 2, penalised });
}

/**
 * A curve per level, each without its constant, which is the factor's; each level has a penalty of its own.
 *
 * @example levelledCoordinates(basis).penalties.length; // as many as levels
 */
export function levelledCoordinates({ size, levels }: LevelledSmoothBasis): TermCoordinates {
  const { matrix, unpenalised, penalised } = identityTransform(size, false);
  const count = levels.length;
  return {
    transform: { form: "blocks", matrix, rows: size, columns: size - 1, count, unpenalised },
    rawWidth: count * size,
    unpenalised: count * unpenalised,
    penalised: count * penalised,
    penalties: levels.map((_, level) => ({ start: level * penalised, end: (level + 1) * penalised, diagonal: null })),
    grouped: false,
  };
}
