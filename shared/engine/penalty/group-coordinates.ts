import type { FactorSmoothBasis, RandomEffectBasis } from "../types";
import type { TermCoordinates } from "./coordinates";

/**
 * One coordinate per group, its coefficient itself, all under one ridge.
 *
 * @example effectCoordinates(basis).penalised; // as many as groups
 */
export function effectCoordinates({ levels }: RandomEffectBasis): TermCoordinates {
  const count = levels.length;
  return {
    transform: { form: "blocks", matrix: Float64Array.of(1), rows: 1, columns: 1, count, unpenalised: 0 },
    rawWidth: count,
    unpenalised: 0,
    penalised: count,
    penalties: [{ start: 0, end: 1, diagonal: null }],
    grouped: true,
  };
}

/**
 * A group's level, slope and wiggly part, each under a penalty that all groups share.
 *
 * @example deviationCoordinates(basis).penalties.length; // 3
 */
export function deviationCoordinates({ size, levels, toCoefficients }: FactorSmoothBasis): TermCoordinates {
  const count = levels.length;
  return {
    transform: { form: "blocks", matrix: toCoefficients, rows: size, columns: size, count, unpenalised: 0 },
    rawWidth: count * size,
    unpenalised: 0,
    penalised: count * size,
    penalties: [[0, 1], [1, 2], [2, size]].map(([start, end]) => ({ start, end, diagonal: null })),
    grouped: true,
  };
}
