import { basisRows, coefficientNames, columnsOf } from "../basis/term-basis";
import { numberColumn } from "../basis/columns";
import { EngineError } from "../errors";
import { familyRules } from "../family/family";
import type { FamilyRules } from "../family/family-rules";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { FitOptions, FittedModel, FittedTerm, ModelData, ModelSpec, TermSpec } from "../types";
import { checkSpec } from "./check-spec";
import { coefficientMap, mapCovariance } from "./coefficient-map";
import type { CoefficientMap } from "./coefficient-map";
import { coordinateCovariance } from "./coordinates";
import type { Design } from "./design";
import { buildDesign } from "./design";
import { fitExact } from "./fit-exact";
import { fitIterative } from "./fit-iterative";
import type { FittedRows } from "./fitted-rows";
import { fittedRows } from "./fitted-rows";
import { fitWarnings } from "./fit-warnings";
import { goodness } from "./goodness";
import { groupCovariance } from "./group-covariance";
import { modelInformation } from "./model-information";
import { derivatives } from "./penalty-search";
import { coefficientsAt } from "./predictor";
import type { WorkingFit } from "./working-fit";

const defaultMaxIterations = 200;

/**
 * Fits an additive model y_i ~ family(mu_i), g(mu_i) = intercept + sum_j f_j(x_ij) + offset_i, smoothness chosen by
 * restricted likelihood, as asked by degrees of freedom, or given. Curves are centred over the rows; bands come from
 * the Bayesian posterior covariance (X'WX + S)^-1 x dispersion (of the curve without its shape, where it has one).
 * Sources: Hastie & Tibshirani (1990); Eilers & Marx (1996); Wood (2011); Wahba (1983); Marra & Wood (2012).
 *
 * @param spec what to fit; checked.
 * @param data columns of equal length, units as the caller has them; not changed. Rows of weight zero are left out.
 * @returns plain data; `fitted` has one value per row of `data`. `converged` false comes with a warning that says why.
 * @throws EngineError for every bad input: missing or unequal columns, values not finite, negative counts, constant columns ...
 * Cost: O(n x pairs of terms) + O(coefficients^3) per working model, linear in the number of groups; never n x coefficients
 * of memory.
 * @example
 * const model = fitModel(
 *   { response: "units", family: "quasi-poisson", terms: [{ kind: "smooth", column: "price", log: true, size: 8 }] },
 *   { units: [12, 30, 8, 25, 11], price: [1.99, 1.49, 2.19, 1.55, 2.05] },
 * );
 */
export function fitModel(spec: ModelSpec, data: ModelData, options: FitOptions = {}): FittedModel {
  checkSpec(spec, data);
  const family = familyRules(spec.family);
  const rows = fittedRows(spec, data);
  family.check(rows.response, spec.response);
  const design = buildDesign(spec.terms, rows.data, rows.count);
  const map = coefficientMap(design);
  const fit = family.fitting === "exact"
    ? fitExact(design, { ...rows, response: family.transform(rows.response) }, map)
    : fitIterative(design, family, rows, { map, maxIterations: iterationLimit(options) });
  return assembleModel({ spec, data, family, rows, design, map, fit });
}

function iterationLimit(options: FitOptions): number {
  const limit = options.maxIterations ?? defaultMaxIterations;
  if (Number.isInteger(limit) && limit >= 1) return limit;
  throw new EngineError("option-invalid", `maxIterations is ${limit}; it must be a whole number of at least 1.`);
}

type Parts = {
  spec: ModelSpec;
  data: ModelData;
  family: FamilyRules;
  rows: FittedRows;
  design: Design;
  map: CoefficientMap;
  fit: WorkingFit;
};

function assembleModel(parts: Parts): FittedModel {
  const { spec, family, rows, design, map, fit } = parts;
  const { system, search, edf: edfs } = fit.solution;
  const state = derivatives(search, "gradient");
  const edf = system.unpenalisedKept + edfs.reduce((sum, value) => sum + value, 0);
  const measures = goodness(family, rows, fit, edf);
  const { dispersion } = measures;
  const coefficients = coefficientsAt(design, map, fit.coordinates);
  const terms = fittedTerms(design, fit);
  const fitted = fittedMeans(parts, coefficients, terms, dispersion);
  return {
    format: 1,
    spec: copySpec(spec),
    rowCount: rows.count,
    coefficients,
    coefficientNames: namesOf(design),
    covariance: mapCovariance(map, coordinateCovariance(system, state), design.size, dispersion),
    groupCovariance: groupCovariance(design, map, state, dispersion),
    terms,
    information: modelInformation(design, fit),
    fitted,
    dispersion,
    theta: fit.theta,
    logLikelihood: measures.logLikelihood,
    edf,
    deviance: measures.deviance,
    nullDeviance: measures.nullDeviance,
    criterion: fit.criterion,
    fractionalResponse: rows.response.some((value) => !Number.isInteger(value)),
    converged: fit.converged,
    iterations: fit.iterations,
    warnings: [...design.warnings, ...fitWarnings({ design, fit, rows, family: spec.family, fitted, isPerfect: measures.isPerfect })],
  };
}

/** Its own, down to the terms' lists, so that a caller may go on changing the one given. */
function copySpec(spec: ModelSpec): ModelSpec {
  return { ...spec, terms: spec.terms.map((term) => structuredCopy(term)) };
}

function structuredCopy<Term extends TermSpec>(term: Term): Term {
  const copy: Record<string, unknown> = {};
  for (const [key, value] of Object.entries(term)) {
    copy[key] = Array.isArray(value) ? [...(value as unknown[])] : typeof value === "object" ? { ...(value as object) } : value;
  }
  return copy as Term;
}

/** In the order of the coefficients: shared terms, then terms on eliminated groups. */
function namesOf(design: Design): string[] {
  const ordered = [...design.terms].sort((left, right) => left.design.rawFirst - right.design.rawFirst);
  return ["intercept", ...ordered.flatMap(({ basis, design: part }) => coefficientNames(basis, part.id))];
}

function fittedTerms(design: Design, fit: WorkingFit): FittedTerm[] {
  const { system: { dropped }, edf, search: { current: { multipliers } } } = fit.solution;
  return design.terms.map(({ spec, design: part, basis, seen, observedRange }) => {
    const { coordinates, id, rawFirst, unpenalisedFirst, penalisedFirst, groupFirst } = part;
    const last = unpenalisedFirst + coordinates.unpenalised;
    const left = dropped.filter(({ column }) => column >= unpenalisedFirst && column < last).length;
    const own = design.penalties.flatMap((penalty, position) => (penalty.id === id ? [position] : []));
    return {
      id,
      kind: spec.kind,
      columns: columnsOf(spec),
      first: rawFirst,
      count: coordinates.rawWidth,
      edf: own.reduce((sum, penalty) => sum + edf[penalty], groupFirst === null ? coordinates.unpenalised - left : 0),
      penalties: own.map((penalty) => multipliers[penalty]),
      basis, observedRange, seen,
      layout: { unpenalisedFirst, penalisedFirst, groupFirst },
    };
  });
}

/** Per row of the data given, rows of weight zero too. */
function fittedMeans(parts: Parts, coefficients: Float64Array, terms: FittedTerm[], dispersion: number): Float64Array {
  const { spec, data, family, rows, fit } = parts;
  const all = data[spec.response].length;
  if (all === rows.count) return fit.linearPredictor.map((value) => family.mean(value, dispersion));
  const predictor = spec.offset === undefined ? new Float64Array(all) : numberColumn(data, spec.offset, "offset").slice();
  for (let row = 0; row < all; row++) predictor[row] += coefficients[0];
  for (const term of terms) addRowsTimes(basisRows(term.basis, data), coefficients, term.first, predictor);
  return predictor.map((value) => family.mean(value, dispersion));
}
