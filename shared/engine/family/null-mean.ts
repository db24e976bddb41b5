import type { NullRows, WorkingRows } from "./family-rules";

type Rules = { mean(linearPredictor: number): number; working(rows: WorkingRows): void };

const mostSteps = 100;
/** No single step moves the intercept further than this on the link's scale. */
const longestStep = 5;

/**
 * Means of the model with intercept and offset only, by Fisher scoring of the intercept, to rounding. One step where all
 * offsets are the same, as the start is then the answer.
 * Source: McCullagh & Nelder (1989), Generalized Linear Models, section 2.5.
 *
 * @param rules mean and working model of the family.
 * @param start link of the weighted mean response.
 * @returns one mean per row, a new array. O(n) a step.
 * @example nullMean({ mean, working }, rows, Math.log(averageUnits));
 */
export function nullMean(rules: Rules, rows: NullRows, start: number): Float64Array {
  const { offset, weights } = rows;
  const blank = () => new Float64Array(offset.length);
  const linearPredictor = blank();
  const mean = blank();
  const working = { ...rows, linearPredictor, mean, workingResponse: blank(), workingWeights: blank() };
  let intercept = start - weightedMean(offset, weights);
  for (let step = 0; step < mostSteps; step++) {
    for (let row = 0; row < offset.length; row++) {
      linearPredictor[row] = intercept + offset[row];
      mean[row] = rules.mean(linearPredictor[row]);
    }
    rules.working(working);
    const wanted = weightedMean(working.workingResponse, working.workingWeights) - intercept;
    const move = Math.max(-longestStep, Math.min(longestStep, wanted));
    if (!(Math.abs(move) > 1e-12 * Math.max(1, Math.abs(intercept)))) break;
    intercept += move;
  }
  return mean;
}

function weightedMean(values: Float64Array, weights: Float64Array): number {
  let sum = 0;
  let total = 0;
  for (let row = 0; row < values.length; row++) {
    sum += weights[row] * values[row];
    total += weights[row];
  }
  return sum / total;
}
