import { fitModel, predict } from "@shared/engine";
import type { ModelSpec, Smoothness, TermSpec } from "@shared/engine";
import { largestDifference, standardDeviation } from "./measures";
import type { SeriesOfAll } from "./reference-shapes";

export type SeriesComparison = {
  /** Largest difference of the linear predictors, in standard deviations of the reference's (normal: of the response). */
  gap: number;
  /** Whether our criterion at our penalties exceeds that at the reference's. */
  oursIsWorse: boolean;
  converged: boolean;
};

/** Criteria are sums of about a hundred terms: below this two of them are the same. */
const sameCriterion = 1e-6;

/** How many series lie further apart than the limit without ours being the better optimum. */
export const countAgainst = (comparisons: readonly SeriesComparison[], limit: number): number =>
  comparisons.filter(({ gap, oursIsWorse }) => !(gap <= limit) && oursIsWorse).length;

/** Fits one series as all-series.R does; where the two differ, evaluates our criterion at the reference's penalties too. */
export function compareSeries(series: SeriesOfAll, family: "gaussian" | "quasiPoisson"): SeriesComparison {
  const { data } = series;
  const reference = series[family];
  const own = fitModel(specOf(data, family), data);
  const scale = standardDeviation(family === "gaussian" ? data.logmove : reference.linearPredictor);
  const gap = largestDifference(predict(own, data).linearPredictor, reference.linearPredictor) / scale;
  if (gap <= 1e-5) return { gap, oursIsWorse: false, converged: own.converged };
  const there = fitModel(specOf(data, family, reference.penalties), data);
  return { gap, oursIsWorse: !(own.criterion <= there.criterion + sameCriterion), converged: own.converged };
}

function specOf(data: SeriesOfAll["data"], family: "gaussian" | "quasiPoisson", penalties?: readonly [number, number]): ModelSpec {
  const smoothness = (position: 0 | 1): Smoothness => (penalties ? { penalty: penalties[position] } : "auto");
  const varies = (column: readonly number[]) => column.some((value) => value !== column[0]);
  const terms: TermSpec[] = [
    { kind: "smooth", column: "price", log: true, size: 8, smoothness: smoothness(0) },
    { kind: "cyclic-smooth", column: "woy", period: [0.5, 52.5], size: 12, smoothness: smoothness(1) },
  ];
  // A deal or feature that never changes cannot be told from the intercept.
  if (varies(data.deal)) terms.push({ kind: "factor", column: "deal" });
  if (varies(data.feat)) terms.push({ kind: "linear", column: "feat" });
  return family === "gaussian" ? { response: "logmove", family, terms } : { response: "units", family: "quasi-poisson", terms };
}
