import { learnBasis, termId } from "../basis/term-basis";
import { addTransposeTimes, paddedWidth } from "../linalg/sparse-rows";
import type { SparseRows } from "../linalg/sparse-rows";
import { termCoordinates } from "../penalty/term-transform";
import type { TermCoordinates } from "../penalty/term-transform";
import type { ModelData, ModelWarning, SeenValues, Smoothness, TermBasis, TermSpec } from "../types";

/** A term (or the intercept) with its rows and where its coordinates and coefficients stand in the model. */
export type DesignTerm = {
  id: string;
  rows: SparseRows;
  coordinates: TermCoordinates;
  /** First of its unpenalised coordinates, among all coordinates. */
  unpenalisedFirst: number;
  /** First of its penalised coordinates, among all coordinates. */
  penalisedFirst: number;
  /** First of its coefficients. */
  rawFirst: number;
};

export type LearntTerm = {
  spec: TermSpec;
  design: DesignTerm;
  basis: TermBasis;
  seen: SeenValues;
  observedRange: [number, number] | null;
};

/** Penalised coordinates `start` to `end` (counted among the penalised) that share one penalty. */
export type PenaltyBlock = { id: string; start: number; end: number; smoothness: Smoothness; unpenalised: number; size: number };

/** Everything about the rows that stays the same while weights and penalties change. */
export type Design = {
  rowCount: number;
  /** The intercept first, then the terms in the order of the spec. */
  parts: DesignTerm[];
  terms: LearntTerm[];
  blocks: PenaltyBlock[];
  /** Unpenalised coordinates come first: `unpenalised` of `size`. */
  unpenalised: number;
  size: number;
  rawSize: number;
  widest: number;
  warnings: ModelWarning[];
};

const interceptCoordinates: TermCoordinates = {
  transform: { form: "scaled", factor: 1 }, rawWidth: 1, unpenalised: 1, penalised: 0,
};

/**
 * Learns every term from the rows, and lays out coordinates (unpenalised before penalised) and coefficients.
 *
 * @param data columns of the rows fitted to, `rowCount` each.
 * @throws EngineError as the term kinds do.
 * @example buildDesign(spec.terms, data, 110).blocks.length; // penalties to choose
 */
export function buildDesign(termSpecs: readonly TermSpec[], data: ModelData, rowCount: number): Design {
  const ones = new Float64Array(rowCount).fill(1);
  const intercept: SparseRows = { storage: "single", width: 1, values: ones };
  const warnings: ModelWarning[] = [];
  const learnt = termSpecs.map((spec) => {
    const result = learnBasis(spec, data);
    warnings.push(...result.warnings);
    return { ...result, spec, coordinates: termCoordinates(result.basis) };
  });
  const unpenalised = learnt.reduce((sum, term) => sum + term.coordinates.unpenalised, 1);
  const parts: DesignTerm[] = [
    { id: "intercept", rows: intercept, coordinates: interceptCoordinates, unpenalisedFirst: 0, penalisedFirst: unpenalised, rawFirst: 0 },
  ];
  const next = { unpenalised: 1, penalised: unpenalised, raw: 1 };
  const terms = learnt.map(({ spec, rows, coordinates, basis, seen, observedRange }): LearntTerm => {
    const design: DesignTerm = {
      id: termId(spec), rows, coordinates,
      unpenalisedFirst: next.unpenalised, penalisedFirst: next.penalised, rawFirst: next.raw,
    };
    next.unpenalised += coordinates.unpenalised;
    next.penalised += coordinates.penalised;
    next.raw += coordinates.rawWidth;
    parts.push(design);
    centreBasis(basis, rows, ones);
    return { spec, design, basis, seen, observedRange };
  });
  return {
    rowCount, parts, terms, warnings, unpenalised,
    blocks: terms.flatMap((term) => blockOf(term, unpenalised)),
    size: next.penalised,
    rawSize: next.raw,
    widest: Math.max(...parts.map((part) => paddedWidth(part.rows))),
  };
}

/** The mean of each spline over the rows, which centres the curve. */
function centreBasis(basis: TermBasis, rows: SparseRows, ones: Float64Array): void {
  if (!("centring" in basis)) return;
  addTransposeTimes(rows, ones, basis.centring, 0);
  for (let k = 0; k < basis.centring.length; k++) basis.centring[k] /= ones.length;
}

function blockOf(term: LearntTerm, unpenalised: number): PenaltyBlock[] {
  const { coordinates, penalisedFirst, id } = term.design;
  if (coordinates.penalised === 0) return [];
  const start = penalisedFirst - unpenalised;
  return [{
    id, start,
    end: start + coordinates.penalised,
    smoothness: ("smoothness" in term.spec ? term.spec.smoothness : undefined) ?? "auto",
    unpenalised: coordinates.unpenalised,
    size: coordinates.rawWidth,
  }];
}
