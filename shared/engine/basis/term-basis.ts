import type { SparseRows } from "../linalg/sparse-rows";
import type { FittedTerm, ModelData, TermBasis, TermSpec } from "../types";
import type { LearntBasis } from "./basis-kind";
import { cyclicSmooth } from "./cyclic-smooth";
import { factor } from "./factor";
import { linear } from "./linear";
import { smooth } from "./smooth";

/** Columns a term reads. */
export const columnsOf = (term: TermSpec): string[] => [term.column];

/** Name of a term: its own, or its column names joined by ":". */
export const termId = (term: TermSpec): string => term.id ?? columnsOf(term).join(":");

/**
 * Learns a term's basis from the rows it is fitted to, by its kind.
 *
 * @throws EngineError for columns or options the kind cannot use.
 * @example learnBasis({ kind: "linear", column: "price", log: true }, data).basis; // { kind: "linear", centre: ..., ... }
 */
export function learnBasis(term: TermSpec, data: ModelData): LearntBasis<TermBasis> {
  const id = termId(term);
  switch (term.kind) {
    case "linear": return linear.learn(term, id, data);
    case "factor": return factor.learn(term, id, data);
    case "smooth": return smooth.learn(term, id, data);
    case "cyclic-smooth": return cyclicSmooth.learn(term, id, data);
  }
}

/**
 * A learnt term's rows for any data, in the coordinates of the model's coefficients.
 *
 * @throws EngineError for missing or unusable columns and levels never seen.
 * @example basisRows(model.terms[0].basis, { price: [1.49] });
 */
export function basisRows(basis: TermBasis, data: ModelData): SparseRows {
  switch (basis.kind) {
    case "linear": return linear.rows(basis, data);
    case "factor": return factor.rows(basis, data);
    case "smooth": return smooth.rows(basis, data);
    case "cyclic-smooth": return cyclicSmooth.rows(basis, data);
  }
}

/**
 * Rows of d / d ln x, or null for a term without a number behind it.
 *
 * @example basisLogSlopeRows(model.terms[0].basis, { price: [1.49] });
 */
export function basisLogSlopeRows(basis: TermBasis, data: ModelData): SparseRows | null {
  switch (basis.kind) {
    case "linear": return linear.logSlopeRows(basis, data);
    case "factor": return factor.logSlopeRows(basis, data);
    case "smooth": return smooth.logSlopeRows(basis, data);
    case "cyclic-smooth": return cyclicSmooth.logSlopeRows(basis, data);
  }
}

/**
 * Per row, 1 where the term is used outside the range it was fitted to.
 *
 * @example outsideRows(model.terms[0], { price: [0.01] }); // 1
 */
export function outsideRows(term: FittedTerm, data: ModelData): Uint8Array {
  const { basis, observedRange } = term;
  switch (basis.kind) {
    case "linear": return linear.outside(observedRange, basis, data);
    case "factor": return factor.outside(observedRange, basis, data);
    case "smooth": return smooth.outside(observedRange, basis, data);
    case "cyclic-smooth": return cyclicSmooth.outside(observedRange, basis, data);
  }
}

/** One name per coefficient of a term. */
export function coefficientNames(basis: TermBasis, id: string): string[] {
  switch (basis.kind) {
    case "linear": return linear.names(basis, id);
    case "factor": return factor.names(basis, id);
    case "smooth": return smooth.names(basis, id);
    case "cyclic-smooth": return cyclicSmooth.names(basis, id);
  }
}
