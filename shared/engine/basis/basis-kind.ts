import type { SparseRows } from "../linalg/sparse-rows";
import type { ModelData, ModelWarning, SeenValues } from "../types";

/** What a term kind learns from the rows it is fitted to. */
export type LearntBasis<Basis> = {
  basis: Basis;
  /** The term's columns for the fitted rows, before centring by `transformOf`. */
  rows: SparseRows;
  seen: SeenValues;
  observedRange: [number, number] | null;
  warnings: ModelWarning[];
};

/**
 * One kind of term: its columns, and nothing about penalties or fitting. A new kind is a file that exports one of these,
 * a type in types.ts, and a line in term-basis.ts.
 */
export type BasisKind<Term, Basis> = {
  /**
   * Learns knots, levels or centre from the data, and gives the rows fitted with.
   * @throws EngineError for columns or options this kind cannot use.
   */
  learn(term: Term, id: string, data: ModelData): LearntBasis<Basis>;
  /** Rows for any data, in the coordinates of `FittedModel.coefficients`. */
  rows(basis: Basis, data: ModelData): SparseRows;
  /** Rows of the derivative with respect to ln x (x in the column's own unit), or null where there is none. */
  logSlopeRows(basis: Basis, data: ModelData): SparseRows | null;
  /** Per row, 1 where it lies outside what was learnt from. */
  outside(range: [number, number] | null, basis: Basis, data: ModelData): Uint8Array;
  /** One name per coefficient. */
  names(basis: Basis, id: string): string[];
};
