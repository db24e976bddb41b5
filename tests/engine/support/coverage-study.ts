import { designRows, fitModel, normalQuantile, predict, termCurve, transposeTimes } from "@shared/engine";
import type { BandKind, Family, FittedModel } from "@shared/engine";
import { gammaBelow } from "@shared/engine/family/gamma-below";
import { residuals } from "@shared/engine/predict/residuals";
import { simulatedSales, simulatedSpec, truth } from "./simulated-sales";
import type { Shape } from "./simulated-sales";

/** From here on counts are nearly continuous, and a level can be held; below, residuals must be uniform. */
const smallestMean = 20;

export type Study = { sets: number; rows: number; seed: number; shape: Shape; level: number };

/** Kinds of band, as `BandKind` has them, of the centred curve; and two of the curve on its level, the other drivers as on average. */
export const judgedBands = ["pointwise", "with-mean", "corrected", "averaged", "with-mean, on its level", "corrected, on its level"] as const;

/** Share of the curve inside its band, averaged over curve and sets. */
export type CurveCoverage = Record<(typeof judgedBands)[number], number>;

export type Coverage = {
  price: CurveCoverage;
  season: CurveCoverage;
  /** Standard error, by simulation, of the averaged band's share. */
  error: { price: number; season: number };
  /** Share of sets whose price curve was smoothed to a line (less than 1.05 degrees of freedom). */
  straight: number;
  /** Share of new rows inside their interval, of those with a mean of at least 20; null where there is no such interval. */
  observation: number | null;
  /** Kolmogorov-Smirnov's distance from uniform of fitted rows' residuals with lower means, and the share of sets it rejects at 5 %. */
  residuals: { distance: number; rejected: number } | null;
  converged: number;
};

/** Fits models to sets drawn from known curves, and counts how often their bands and intervals hold the truth. O(sets) fits. */
export function coverageStudy(family: Family, study: Study): Coverage {
  const outcomes = Array.from({ length: study.sets }, (_, set) => judge(family, { ...study, seed: study.seed + 1000 * set }));
  const curve = (term: "price" | "season") => perBand((band) => average(outcomes.map((outcome) => outcome[term][band])));
  const judged = outcomes.flatMap(({ inside }) => inside);
  const tested = outcomes.map(({ places }) => places).filter(({ length }) => length > 0);
  return {
    price: curve("price"), season: curve("season"),
    error: { price: standardError(outcomes.map(({ price }) => price.averaged)), season: standardError(outcomes.map(({ season }) => season.averaged)) },
    straight: average(outcomes.map(({ isStraight }) => Number(isStraight))),
    observation: judged.length === 0 ? null : average(judged.map(Number)),
    residuals: tested.length === 0 ? null : { distance: uniformDistance(tested.flat()), rejected: average(tested.map((places) => Number(isRejected(places)))) },
    converged: average(outcomes.map(({ converged }) => Number(converged))),
  };
}

const perBand = (share: (band: keyof CurveCoverage) => number): CurveCoverage => ({
  pointwise: share("pointwise"), "with-mean": share("with-mean"), corrected: share("corrected"), averaged: share("averaged"),
  "with-mean, on its level": share("with-mean, on its level"), "corrected, on its level": share("corrected, on its level"),
});

const average = (values: number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;

function standardError(values: number[]): number {
  const mean = average(values);
  return Math.sqrt(average(values.map((value) => (value - mean) ** 2)) / values.length);
}

type Outcome = { price: CurveCoverage; season: CurveCoverage; isStraight: boolean; inside: boolean[]; places: number[]; converged: boolean };

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
    isStraight: model.terms[0].edf < 1.05,
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
  const term = model.terms.find((candidate) => candidate.id === id);
  if (term === undefined) throw new Error(`No term "${id}".`);
  // The average row, the curve's own part left out.
  const common = transposeTimes(model, designRows(model, data), new Float64Array(data.price.length).fill(1 / data.price.length));
  common.fill(0, term.first, term.first + term.count);
  const levelError = common.reduce((sum, value, k) => sum + value * model.coefficients[k], 0) - middle;
  const quantile = normalQuantile(level);
  const share = (band: BandKind, shift: number) => {
    const { x, estimate, standardError } = termCurve(model, id, { points: 100, level, band });
    return average(Array.from<number | string, number>(x, (value, k) => Number(Math.abs(estimate[k] + shift - curve(Number(value))) <= quantile * standardError[k])));
  };
  return perBand((kind) => {
    if (kind === "with-mean, on its level") return share("with-mean", levelError);
    return kind === "corrected, on its level" ? share("corrected", levelError) : share(kind, 0);
  });
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
