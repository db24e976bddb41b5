import { basisRows, coefficientNames } from "../basis/term-basis";
import { numberColumn } from "../basis/columns";
import { EngineError } from "../errors";
import { familyRules } from "../family/family";
import type { FamilyRules } from "../family/family-rules";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { FitOptions, FittedModel, FittedTerm, ModelData, ModelSpec } from "../types";
import { checkSpec } from "./check-spec";
import { applyMap, coefficientMap, coordinateCovariance, mapCovariance } from "./coefficients";
import type { CoefficientMap } from "./coefficients";
import type { Design } from "./design";
import { buildDesign } from "./design";
import { fitExact } from "./fit-exact";
import { fitIterative } from "./fit-iterative";
import type { FittedRows } from "./fitted-rows";
import { fittedRows } from "./fitted-rows";
import { goodness } from "./goodness";
import { fitWarnings } from "./fit-warnings";
import type { WorkingFit } from "./working-fit";

const defaultMaxIterations = 200;

/**
 * Fits an additive model y_i ~ family(mu_i), g(mu_i) = intercept + sum_j f_j(x_ij) + offset_i, smoothness chosen by
 * restricted likelihood, as asked by degrees of freedom, or given. Curves are centred over the rows; bands come from
 * the Bayesian posterior covariance (X'WX + S)^-1 x dispersion.
 * Sources: Hastie & Tibshirani (1990); Eilers & Marx (1996); Wood (2011); Wahba (1983); Marra & Wood (2012).
 *
 * @param spec what to fit; checked.
 * @param data columns of equal length, units as the caller has them; not changed. Rows of weight zero are left out.
 * @returns plain data; `fitted` has one value per row of `data`. `converged` false comes with a warning that says why.
 * @throws EngineError for every bad input: missing or unequal columns, values not finite, negative counts, constant columns ...
 * Cost: O(n x pairs of terms) + O(coefficients^3) per working model; never n x coefficients of memory.
 * @example
 * const model = fitModel(
 *   { response: "units", family: "quasi-poisson", terms: [{ kind: "smooth", column: "price", log: true, size: 8 }] },
 *   { units: [12, 30, 8, 25, 11], price: [1.99, 1.49, 2.19, 1.55, 2.05] },
 * );
 */
export function fitModel(spec: ModelSpec, data: ModelData, options: FitOptions = {}): FittedModel {
  checkSpec(spec);
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
  const { current } = fit.search;
  const edf = fit.reduced.unpenalisedKept + current.edf.reduce((sum, value) => sum + value, 0);
  const measures = goodness(family, rows, fit, edf);
  const coefficients = applyMap(map, fit.coordinates);
  const covariance = mapCovariance(map, coordinateCovariance(fit.reduced, current), design.size, measures.dispersion);
  const terms = fittedTerms(design, fit);
  const warnings = [...design.warnings, ...fitWarnings({ design, fit, rows, family: spec.family, isPerfect: measures.isPerfect })];
  return {
    format: 1,
    spec: structuredClone(spec),
    rowCount: rows.count,
    coefficients,
    coefficientNames: ["intercept", ...terms.flatMap((term) => coefficientNames(term.basis, term.id))],
    covariance,
    terms,
    fitted: fittedMeans(parts, coefficients, terms, measures.dispersion),
    dispersion: measures.dispersion,
    edf,
    deviance: measures.deviance,
    nullDeviance: measures.nullDeviance,
    criterion: fit.criterion,
    fractionalResponse: rows.response.some((value) => !Number.isInteger(value)),
    converged: fit.converged,
    iterations: fit.iterations,
    warnings,
  };
}

function fittedTerms(design: Design, fit: WorkingFit): FittedTerm[] {
  const { edf, logPenalties } = fit.search.current;
  return design.terms.map(({ spec, design: part, basis, seen, observedRange }) => {
    const { coordinates, id, rawFirst, unpenalisedFirst } = part;
    const last = unpenalisedFirst + coordinates.unpenalised;
    const dropped = fit.reduced.dropped.filter(({ column }) => column >= unpenalisedFirst && column < last).length;
    const blocks = design.blocks.flatMap((block, position) => (block.id === id ? [position] : []));
    return {
      id,
      kind: spec.kind,
      columns: [spec.column],
      first: rawFirst,
      count: coordinates.rawWidth,
      edf: blocks.reduce((sum, block) => sum + edf[block], coordinates.unpenalised - dropped),
      penalties: blocks.map((block) => Math.exp(logPenalties[block])),
      basis, observedRange, seen,
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
