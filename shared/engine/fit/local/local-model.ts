import { columnsOf } from "../../basis/term-basis";
import type { FittedModel, FittedTerm } from "../../types";
import { applyMap, mapCovariance } from "../coefficient-map";
import type { CoefficientMap } from "../coefficient-map";
import { goodness } from "../goodness";
import { commonParts } from "../model-parts";
import type { ModelParts } from "../model-parts";
import { centredPooled } from "./centred-pooled";
import { weightedVariances } from "./weighted-variances";
import { fitLocal } from "./fit-local";
import type { LocalFit } from "./fit-local";
import { jointPosterior } from "./joint-posterior";
import type { JointPosterior } from "./joint-posterior";

/**
 * Fits a model with local regressions as plain data. A local regression's coefficients are its pooled partial residuals at
 * the distinct points, less the curve's mean over the rows; its basis keeps the working weights, so that the rows of any
 * data times the coefficients give the curve. There is no X'WX in coordinates, so `information` is null. A local curve's
 * operator L is no projection: the dispersion divides by n - tr(2L - LL'), whose expectation is right (Hastie & Tibshirani
 * 1990, section 3.5; Cleveland & Devlin 1988), and which is n - edf where nothing is local.
 *
 * @throws EngineError as `fitLocal`.
 * @example fitLocalModel({ spec, data, family, rows, design, map }, 200).terms[0].edf;
 */
export function fitLocalModel(given: Omit<ModelParts, "fit">, maxIterations: number): FittedModel {
  const { family, rows, design, map } = given;
  const fit = fitLocal(design, family, rows, { map, maxIterations });
  const parts: ModelParts<LocalFit> = { ...given, fit };
  const posterior = jointPosterior(fit.joint);
  const edf = [...posterior.coordinateEdf, ...posterior.localEdf].reduce((sum, value) => sum + value, 0);
  const { unknowns, covariance } = centredPooled(fit.joint, posterior.covariance);
  unknowns[0] += fit.equations.shift;
  const toCoefficients = jointMap(parts);
  const coefficients = applyMap(toCoefficients, unknowns);
  const terms = localTerms(parts, posterior);
  const perDispersion = mapCovariance(toCoefficients, covariance, unknowns.length, 1);
  const measures = goodness(family, rows, fit, 2 * edf - weightedVariances(terms, perDispersion, { data: rows.data, weights: fit.workingWeights }));
  return {
    ...commonParts(parts, { coefficients, terms, edf, measures }),
    covariance: perDispersion.map((value) => value * measures.dispersion),
    groupCovariance: null,
    information: null,
  };
}

/**
 * The map of the other terms' coordinates, and one unknown for each coefficient of a local regression, whose level is
 * the intercept's.
 */
function jointMap({ map, fit: { joint: { system: { level, layout: { fixed, locals } } } } }: ModelParts<LocalFit>): CoefficientMap {
  const unknownOf = new Map(locals.flatMap(({ part, first, count }) =>
    Array.from({ length: count }, (_, k): [number, number] => [part.rawFirst + k, first + k])));
  const starts = new Int32Array(map.rows + 1);
  const columns: number[] = [];
  const values: number[] = [];
  for (let row = 0; row < map.rows; row++) {
    const unknown = unknownOf.get(row);
    if (unknown === undefined) {
      columns.push(...map.columns.subarray(map.starts[row], map.starts[row + 1]));
      values.push(...map.values.subarray(map.starts[row], map.starts[row + 1]));
    } else {
      columns.push(unknown);
      values.push(1);
    }
    if (row === 0) {
      for (let k = fixed; k < level.length; k++) columns.push(k);
      values.push(...level.subarray(fixed));
    }
    starts[row + 1] = columns.length;
  }
  return { rows: map.rows, starts, columns: Int32Array.from(columns), values: Float64Array.from(values) };
}

function localTerms({ design, fit }: ModelParts<LocalFit>, { coordinateEdf, localEdf }: JointPosterior): FittedTerm[] {
  const { joint: { system: { layout, operators } }, solution: { search: { current: { multipliers } } } } = fit;
  return design.terms.map(({ spec, design: part, basis, seen, observedRange }) => {
    const { id, rawFirst, positions, coordinates: { rawWidth }, unpenalisedFirst, penalisedFirst } = part;
    const at = layout.locals.findIndex((local) => local.part === part);
    return {
      id,
      kind: spec.kind,
      columns: columnsOf(spec),
      first: rawFirst,
      count: rawWidth,
      edf: at < 0 ? positions.reduce((sum, position) => sum + coordinateEdf[position], 0) : localEdf[at],
      penalties: design.penalties.flatMap((penalty, j) => (penalty.id === id ? [multipliers[j]] : [])),
      basis: at < 0 ? basis : operators[at].basis,
      observedRange, seen,
      layout: { unpenalisedFirst, penalisedFirst, groupFirst: null },
    };
  });
}
