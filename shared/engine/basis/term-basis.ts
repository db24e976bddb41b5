import type { SparseRows } from "../linalg/sparse-rows";
import type { FittedTerm, ModelData, SmoothTerm, TermBasis, TermSpec } from "../types";
import type { BasisKind, LearntBasis } from "./basis-kind";
import { cyclicSmooth } from "./cyclic-smooth";
import { factor } from "./factor";
import { factorSmooth } from "./factor-smooth";
import { levelledSmooth } from "./levelled-smooth";
import { linear } from "./linear";
import { localRegression } from "./local-regression";
import { naturalSpline } from "./natural-spline";
import { randomEffect } from "./random-effect";
import { randomWalk } from "./random-walk";
import { scaledSmooth } from "./scaled-smooth";
import type { ScaledSmoothTerm } from "./scaled-smooth";
import { smooth } from "./smooth";
import { tensorProduct } from "./tensor-product";

/** Columns a term reads. */
export function columnsOf(term: TermSpec): string[] {
  switch (term.kind) {
    case "tensor-product": return [...term.columns];
    case "factor-smooth": return [term.column, term.group];
    case "smooth":
    case "random-effect": return term.by === undefined ? [term.column] : [term.column, term.by];
    default: return [term.column];
  }
}

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
    case "smooth": return learnSmooth(term, id, data);
    case "cyclic-smooth": return cyclicSmooth.learn(term, id, data);
    case "natural-spline": return naturalSpline.learn(term, id, data);
    case "local-regression": return localRegression.learn(term, id, data);
    case "tensor-product": return tensorProduct.learn(term, id, data);
    case "random-walk": return randomWalk.learn(term, id, data);
    case "random-effect": return randomEffect.learn(term, id, data);
    case "factor-smooth": return factorSmooth.learn(term, id, data);
  }
}

/** A smooth by itself, times a column of numbers, or one per level of a column of text. */
function learnSmooth(term: SmoothTerm, id: string, data: ModelData): LearntBasis<TermBasis> {
  if (!isVarying(term)) return smooth.learn(term, id, data);
  const by = Object.hasOwn(data, term.by) ? data[term.by] : [];
  return typeof by[0] === "string" ? levelledSmooth.learn(term, id, data) : scaledSmooth.learn(term, id, data);
}

const isVarying = (term: SmoothTerm): term is ScaledSmoothTerm => term.by !== undefined;

type Learnt<Basis> = Pick<BasisKind<never, Basis>, "rows" | "logSlopeRows" | "outside" | "names">;

const kinds: { [Kind in TermBasis["kind"]]: Learnt<Extract<TermBasis, { kind: Kind }>> } = {
  linear, factor, smooth,
  "scaled-smooth": scaledSmooth,
  "levelled-smooth": levelledSmooth,
  "cyclic-smooth": cyclicSmooth,
  "natural-spline": naturalSpline,
  "local-regression": localRegression,
  "tensor-product": tensorProduct,
  "random-walk": randomWalk,
  "random-effect": randomEffect,
  "factor-smooth": factorSmooth,
};

/** The kind of a learnt basis takes that basis: the table's type says so, but only entry by entry. */
const kindOf = (basis: TermBasis): Learnt<TermBasis> => kinds[basis.kind] as Learnt<TermBasis>;

/**
 * A learnt term's rows for any data, in the coordinates of the model's coefficients.
 *
 * @throws EngineError for missing or unusable columns and levels never seen.
 * @example basisRows(model.terms[0].basis, { price: [1.49] });
 */
export const basisRows = (basis: TermBasis, data: ModelData): SparseRows => kindOf(basis).rows(basis, data);

/**
 * Rows of d / d ln x, or null for a term without a number behind it.
 *
 * @example basisLogSlopeRows(model.terms[0].basis, { price: [1.49] });
 */
export const basisLogSlopeRows = (basis: TermBasis, data: ModelData): SparseRows | null => kindOf(basis).logSlopeRows(basis, data);

/**
 * Per row, 1 where the term is used outside the range it was fitted to.
 *
 * @example outsideRows(model.terms[0], { price: [0.01] }); // 1
 */
export const outsideRows = (term: FittedTerm, data: ModelData): Uint8Array => kindOf(term.basis).outside(term.observedRange, term.basis, data);

/** One name per coefficient of a term. */
export const coefficientNames = (basis: TermBasis, id: string): string[] => kindOf(basis).names(basis, id);
