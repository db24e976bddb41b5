import type { FactorBasis, TermBasis } from "../types";
import { identityTransform } from "./difference-penalty";

/**
 * From the coordinates a term is fitted in to the coefficients of its raw columns.
 * scaled: coefficient = factor x coordinate. without: the raw column `leftOut` has coefficient zero. dense: coefficients =
 * matrix x coordinates. blocks: the same dense matrix (rows x columns) for each of `count` levels; a level's first
 * `unpenalised` coordinates stand among the term's unpenalised ones, level by level, the others among its penalised ones.
 */
export type TermTransform =
  | { form: "scaled"; factor: number }
  | { form: "without"; leftOut: number }
  | { form: "dense"; matrix: Float64Array }
  | { form: "blocks"; matrix: Float64Array; rows: number; columns: number; count: number; unpenalised: number };

/** One penalty: its diagonal over the term's penalised coordinates `start` to `end` (all ones where null). */
export type PenaltyShape = { start: number; end: number; diagonal: Float64Array | null };

/**
 * Fitting coordinates of a term: the unpenalised come first, then those under diagonal penalties.
 * For a term on groups (`grouped`) transform is blocks without unpenalised coordinates, `penalties` cover one group's
 * coordinates and hold for every group alike.
 */
export type TermCoordinates = {
  transform: TermTransform;
  rawWidth: number;
  unpenalised: number;
  penalised: number;
  penalties: PenaltyShape[];
  grouped: boolean;
};

/**
 * The coordinates a term is fitted in, by its kind.
 *
 * @example termCoordinates(model.terms[0].basis).penalised; // 8 for a smooth of size 10
 */
export function termCoordinates(basis: TermBasis): TermCoordinates {
  switch (basis.kind) {
    case "linear": return { transform: { form: "scaled", factor: 1 / basis.scale }, rawWidth: 1, unpenalised: 1, penalised: 0 };
    case "factor": return treatmentCoding(basis);
    case "smooth": return splineCoordinates(basis.size, false);
    case "cyclic-smooth": return splineCoordinates(basis.size, true);
  }
}

function treatmentCoding(basis: FactorBasis): TermCoordinates {
  const width = basis.levels.length;
  return {
    transform: { form: "without", leftOut: basis.levels.indexOf(basis.reference) },
    rawWidth: width,
    unpenalised: width - 1,
    penalised: 0,
  };
}

function splineCoordinates(size: number, wraps: boolean): TermCoordinates {
  const { matrix, unpenalised, penalised } = identityTransform(size, wraps);
  return { transform: { form: "dense", matrix }, rawWidth: size, unpenalised, penalised };
}
