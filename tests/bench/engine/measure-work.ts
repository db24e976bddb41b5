import { fitModel, predict } from "@shared/engine";
import { largestDifference, standardDeviation } from "../../engine/support/measures";
import { measureFirstFit } from "./first-fit";
import type { ReferenceWork } from "./reference";
import type { Rows } from "./rows";
import { median, warmMedian } from "./time-fits";
import type { Work } from "./works";

/** One line of the table. Of many models, times are per model and differences the median of theirs. */
export type MeasuredWork = {
  work: Work["name"];
  title: string;
  rows: number;
  models: number;
  oursMs: number;
  coldMs: number;
  referenceMs: number;
  ratio: number;
  requiredRatio: number;
  /** Of the linear predictors, in the reference's standard deviations, and of the degrees of freedom in all. */
  largestDifferences: { fitted: number; edf: number };
  /** Highest memory of a first fit over the rows held. */
  memoryMb: number;
};

export function measureWork(work: Work, { rows, folder, reference }: { rows: Rows; folder: string; reference: ReferenceWork }): MeasuredWork {
  const sets = work.rowsOf(rows);
  const first = measureFirstFit({ folder, work: work.name });
  const oursMs = warmMedian(() => sets.forEach((set) => fitModel(work.spec, set)), work.often) / sets.length;
  const referenceMs = reference.ms / sets.length;
  const gaps = sets.map((set, position) => {
    const model = fitModel(work.spec, set);
    const expected = reference.linearPredictors[position];
    const fitted = largestDifference(predict(model, set).linearPredictor, expected) / standardDeviation(expected);
    return { fitted, edf: Math.abs(model.edf - reference.edf[position]) };
  });
  return {
    work: work.name, title: work.title, rows: sets.reduce((sum, set) => sum + set.price.length, 0), models: sets.length,
    oursMs, coldMs: first.coldMs, referenceMs, ratio: referenceMs / oursMs, requiredRatio: work.requiredRatio,
    largestDifferences: { fitted: median(gaps.map(({ fitted }) => fitted)), edf: median(gaps.map(({ edf }) => edf)) },
    memoryMb: first.memoryMb,
  };
}
