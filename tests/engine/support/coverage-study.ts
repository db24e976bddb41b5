import { covarianceQuadratic, designRows, fitModel, normalQuantile, predict, termCurve, transposeTimes } from "@shared/engine";
import type { Family, FittedModel } from "@shared/engine";
import { gammaBelow } from "@shared/engine/family/gamma-below";
import { addTransposeTimes } from "@shared/engine/linalg/sparse-rows";
import { residuals } from "@shared/engine/predict/residuals";
import { basisRows } from "@shared/engine/basis/term-basis";
import { simulatedSales, simulatedSpec, truth } from "./simulated-sales";
import type { Shape } from "./simulated-sales";

/** From here on counts are nearly continuous, and a level can be held; below, residuals must be uniform. */
const smallestMean = 20;

export type Study = { sets: number; rows: number; seed: number; shape: Shape; level: number };

export type CurveCoverage = {
  /**
   * Share of the curve inside its pointwise band, averaged over curve and sets: the curve on its level, the other drivers as on
   * average.
   */
  onLevel: number;
  /**
   * The centred curve in its own band, which pinches where the curve crosses its mean. It holds less where a curve is all but a
   * line, as the mean's error is missing there (Marra & Wood 2012, section 3). R's mgcv 1.8-41 on 100 sets of 156 rows, gentle
   * price curve: gaussian 0.82, quasi-Poisson 0.78, negative binomial 0.82.
   */
  centred: number;
  /** The centred curve in a band as wide as that of the curve on its level (Marra & Wood 2012, section 3, recommend it). */
  withMean: number;
};

export type Coverage = {
  price: CurveCoverage;
  season: CurveCoverage;
  /** Share of new rows inside their interval, of those with a mean of at least 20; null where there is no such interval. */
  observation: number | null;
  /** Kolmogorov-Smirnov's distance from uniform of fitted rows' residuals with lower means, and the share of sets it rejects at 5 %. */
  residuals: { distance: number; rejected: number } | null;
  converged: number;
};

/** Fits models to sets drawn from known curves, and counts how often their bands and intervals hold the truth. O(sets) fits. */
export function coverageStudy(family: Family, study: Study): Coverage {
  const outcomes = Array.from({ length: study.sets }, (_, set) => judge(family, { ...study, seed: study.seed + 1000 * set }));
  const curve = (term: "price" | "season"): CurveCoverage => ({
    onLevel: average(outcomes.map((outcome) => outcome[term].onLevel)),
    centred: average(outcomes.map((outcome) => outcome[term].centred)),
    withMean: average(outcomes.map((outcome) => outcome[term].withMean)),
  });
  const judged = outcomes.flatMap(({ inside }) => inside);
  const tested = outcomes.map(({ places }) => places).filter(({ length }) => length > 0);
  return {
    price: curve("price"), season: curve("season"),
    observation: judged.length === 0 ? null : average(judged.map(Number)),
    residuals: tested.length === 0 ? null : { distance: uniformDistance(tested.flat()), rejected: average(tested.map((places) => Number(isRejected(places)))) },
    converged: average(outcomes.map(({ converged }) => Number(converged))),
  };
}

const average = (values: number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;

type Outcome = { price: CurveCoverage; season: CurveCoverage; inside: boolean[]; places: number[]; converged: boolean };

function judge(family: Family, study: Study): Outcome {
  const { seed, shape, rows: count } = study;
  const { data, mean, predictor } = simulatedSales(family, { seed, count, shape });
  const model = fitModel(simulatedSpec(family), data);
  const middle = average(predictor.map((value, row) => value - data.logExposure[row]));
  const isCount = family === "quasi-poisson" || family === "negative-binomial";
  const places = !isCount ? [] : Array.from(residuals(model, data, { kind: "quantile", seed: seed + 1 }), normalBelow);
  const of = (id: string, values: number[], curve: (value: number) => number) => {
    const centre = average(values.map(curve));
    return sharesInside(model, { id, data, middle, level: study.level, curve: (value) => curve(value) - centre });
  };
  return {
    price: of("price", data.price, truth.price[shape]),
    season: of("yearFraction", data.yearFraction, truth.season),
    inside: family === "binomial" ? [] : newRowsInside(model, family, { ...study, seed: seed + 500 }),
    places: places.filter((_place, row) => mean[row] < smallestMean),
    converged: model.converged,
  };
}

function newRowsInside(model: FittedModel, family: Family, { seed, shape, rows, level }: Study): boolean[] {
  const { data, mean } = simulatedSales(family, { seed, count: rows, shape });
  const { lower, upper } = predict(model, data, { level, interval: "observation" });
  return data.response.map((value, row) => lower[row] <= value && value <= upper[row])
    .filter((_held, row) => family === "gaussian" || mean[row] >= smallestMean);
}

type CurveTruth = {
  id: string; data: ReturnType<typeof simulatedSales>["data"]; middle: number; level: number; curve: (value: number) => number;
};

function sharesInside(model: FittedModel, { id, data, middle, level, curve }: CurveTruth): CurveCoverage {
  const { x, lower, upper, estimate } = termCurve(model, id, { points: 100, level });
  const quantile = normalQuantile(level);
  const values = Float64Array.from(Array.from<number | string>(x), Number);
  const term = model.terms.find((candidate) => candidate.id === id);
  if (term === undefined) throw new Error(`No term "${id}".`);
  // The average row, the curve's own part left out.
  const common = transposeTimes(model, designRows(model, data), new Float64Array(data.price.length).fill(1 / data.price.length));
  common.fill(0, term.first, term.first + term.count);
  const commonEstimate = common.reduce((sum, value, k) => sum + value * model.coefficients[k], 0);
  const rows = basisRows(term.basis, { [term.columns[0]]: values });
  const held = Array.from(values, (value, k) => {
    const gradient = common.slice();
    const point = new Float64Array(values.length);
    point[k] = 1;
    addTransposeTimes(rows, point, gradient, term.first);
    const half = quantile * Math.sqrt(covarianceQuadratic(model, gradient, gradient));
    const error = estimate[k] - curve(value);
    return {
      onLevel: Number(Math.abs(commonEstimate - middle + error) <= half),
      withMean: Number(Math.abs(error) <= half),
      centred: Number(lower[k] <= curve(value) && curve(value) <= upper[k]),
    };
  });
  const share = (kind: keyof CurveCoverage) => average(held.map((one) => one[kind]));
  return { onLevel: share("onLevel"), centred: share("centred"), withMean: share("withMean") };
}

const normalBelow = (value: number): number => 0.5 * (1 + Math.sign(value) * gammaBelow((value * value) / 2, 0.5));

/** Largest distance between the empirical distribution and the uniform one (Kolmogorov 1933). */
export function uniformDistance(places: readonly number[]): number {
  const ordered = Float64Array.from(places).sort();
  return ordered.reduce((largest, place, k) => Math.max(largest, place - k / ordered.length, (k + 1) / ordered.length - place), 0);
}

/** At 5 %, by Stephens' (1970) adjustment for the number of values. */
function isRejected(places: readonly number[]): boolean {
  const root = Math.sqrt(places.length);
  return uniformDistance(places) * (root + 0.12 + 0.11 / root) > 1.358;
}
