import { columnsOf } from "../basis/term-basis";
import { EngineError } from "../errors";
import { familyRules } from "../family/family";
import type { FitOptions, FittedModel, FittedTerm, ModelData, ModelSpec } from "../types";
import { checkSpec } from "./check-spec";
import { coefficientMap, mapCovariance } from "./coefficient-map";
import { coordinateCovariance } from "./coordinates";
import type { Design } from "./design";
import { buildDesign } from "./design";
import { fitExact } from "./fit-exact";
import { fitIterative } from "./fit-iterative";
import { fittedRows } from "./fitted-rows";
import { goodness } from "./goodness";
import { groupCovariance } from "./group-covariance";
import { checkBesideLocal, hasLocal } from "./local/check-local";
import { fitLocalModel } from "./local/local-model";
import { modelInformation } from "./model-information";
import { commonParts } from "./model-parts";
import type { ModelParts } from "./model-parts";
import { derivatives } from "./penalty-search";
import { coefficientsAt } from "./predictor";
import { checkDetermined } from "./row-budget";
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
  checkBesideLocal(spec.terms);
  const family = familyRules(spec.family);
  const rows = fittedRows(spec, data);
  family.check(rows.response, spec.response);
  const design = buildDesign(spec.terms, rows.data, rows.count);
  const map = coefficientMap(design);
  if (hasLocal(spec.terms)) return fitLocalModel({ spec, data, family, rows, design, map }, iterationLimit(options));
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

function assembleModel(parts: ModelParts): FittedModel {
  const { family, rows, design, map, fit } = parts;
  const { system, search, edf: edfs } = fit.solution;
  checkDetermined(fit.criterion, rows.count, design.terms.map(({ design: { id } }) => id));
  const state = derivatives(search, "gradient");
  const edf = system.unpenalisedKept + edfs.reduce((sum, value) => sum + value, 0);
  const measures = goodness(family, rows, fit, edf);
  const { dispersion } = measures;
  const coefficients = coefficientsAt(design, map, fit.coordinates);
  return {
    ...commonParts(parts, { coefficients, terms: fittedTerms(design, fit), edf, measures }),
    covariance: mapCovariance(map, coordinateCovariance(system, state), design.size, dispersion),
    groupCovariance: groupCovariance(design, map, state, dispersion),
    information: modelInformation(design, fit),
  };
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
