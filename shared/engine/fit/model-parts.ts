import { basisRows, coefficientNames } from "../basis/term-basis";
import { numberColumn } from "../basis/columns";
import type { FamilyRules } from "../family/family-rules";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { FittedModel, FittedTerm, ModelData, ModelSpec, TermSpec } from "../types";
import type { CoefficientMap } from "./coefficient-map";
import type { Design } from "./design";
import { fitWarnings } from "./fit-warnings";
import type { FittedRows } from "./fitted-rows";
import type { Goodness } from "./goodness";
import type { WorkingFit } from "./working-fit";

/** What a fitted model is put together from, and what its solver may add to `fit`. */
export type ModelParts<Fit extends WorkingFit = WorkingFit> = {
  spec: ModelSpec;
  data: ModelData;
  family: FamilyRules;
  rows: FittedRows;
  design: Design;
  map: CoefficientMap;
  fit: Fit;
};

/**
 * All of a model but its covariances and what tests are computed from, which each way of fitting has in a form of its own.
 *
 * @param found.coefficients shared terms first, then terms on eliminated groups.
 * @example commonParts(parts, { coefficients, terms, edf, measures }).fitted;
 */
export function commonParts(
  parts: ModelParts, found: { coefficients: Float64Array; terms: FittedTerm[]; edf: number; measures: Goodness },
): Omit<FittedModel, "covariance" | "groupCovariance" | "information"> {
  const { spec, rows, design, fit } = parts;
  const { coefficients, terms, edf, measures: { dispersion, deviance, nullDeviance, logLikelihood, isPerfect } } = found;
  const fitted = fittedMeans(parts, coefficients, terms, dispersion);
  return {
    format: 1,
    spec: copySpec(spec),
    rowCount: rows.count,
    coefficients,
    coefficientNames: namesOf(design),
    terms, fitted, dispersion,
    band: "pointwise",
    theta: fit.theta,
    logLikelihood, edf, deviance, nullDeviance,
    criterion: fit.criterion,
    fractionalResponse: hasFractions(rows.response),
    converged: fit.converged,
    iterations: fit.iterations,
    warnings: [...design.warnings, ...fitWarnings({ design, fit, rows, family: spec.family, fitted, isPerfect })],
  };
}

/**
 * Its own, down to the terms' lists, so that a caller may go on changing the one given.
 *
 * @example copySpec(spec).terms !== spec.terms; // true
 */
function copySpec(spec: ModelSpec): ModelSpec {
  return { ...spec, terms: spec.terms.map((term) => structuredCopy(term)) };
}

function structuredCopy<Term extends TermSpec>(term: Term): Term {
  const copy: Record<string, unknown> = { ...term };
  for (const key of Object.keys(copy)) {
    const value = copy[key];
    if (typeof value === "object") copy[key] = Array.isArray(value) ? [...(value as unknown[])] : { ...value };
  }
  return copy as Term;
}

/**
 * Names in the order of the coefficients: shared terms, then terms on eliminated groups.
 *
 * @example namesOf(design)[0]; // "intercept"
 */
function namesOf(design: Design): string[] {
  const ordered = [...design.terms].sort((left, right) => left.design.rawFirst - right.design.rawFirst);
  return ["intercept", ...ordered.flatMap(({ basis, design: part }) => coefficientNames(basis, part.id))];
}

/**
 * Means per row of the data given, rows of weight zero too.
 *
 * @param terms in any order; their bases give the rows that were not fitted to.
 * @example fittedMeans(parts, coefficients, terms, dispersion).length; // rows of the data
 */
function fittedMeans(parts: ModelParts, coefficients: Float64Array, terms: FittedTerm[], dispersion: number): Float64Array {
  const { spec, data, family, rows, fit } = parts;
  const all = data[spec.response].length;
  if (all === rows.count) return meansAt(fit.linearPredictor, family, dispersion);
  const predictor = spec.offset === undefined ? new Float64Array(all) : numberColumn(data, spec.offset, "offset").slice();
  for (let row = 0; row < all; row++) predictor[row] += coefficients[0];
  for (const term of terms) addRowsTimes(basisRows(term.basis, data), coefficients, term.first, predictor);
  return meansAt(predictor, family, dispersion);
}

function meansAt(predictor: Float64Array, family: FamilyRules, dispersion: number): Float64Array {
  const means = new Float64Array(predictor.length);
  for (let row = 0; row < means.length; row++) means[row] = family.mean(predictor[row], dispersion);
  return means;
}

/**
 * Whether any value is not a whole number.
 *
 * @example hasFractions(Float64Array.of(1, 1.5)); // true
 */
function hasFractions(values: Float64Array): boolean {
  for (let row = 0; row < values.length; row++) if (!Number.isInteger(values[row])) return true;
  return false;
}
