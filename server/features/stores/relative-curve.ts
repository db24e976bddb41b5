import {
  covarianceQuadratic,
  designRows,
  normalQuantile,
  termCurve,
  transposeTimes,
  type FittedModel,
  type FittedTerm,
  type ModelData,
  type TermCurve,
} from "@shared/engine";

/** A curve with the values it was asked at. */
export type BandedCurve = Pick<TermCurve, "estimate" | "standardError" | "lower" | "upper">;

/**
 * A term's curve relative to one value of its column, on the link scale: f(x) - f(anchor), with the band of the difference,
 * in which what both share cancels (delta method; the difference is linear in the coefficients, so it is exact). At the
 * anchor curve and band are zero.
 *
 * @param x values to draw at, in the column's own unit.
 * @param level probability of the band.
 * @throws EngineError as `termCurve`.
 * @example relativeCurve({ model, term, x: [1.49, 1.99], anchor: 1.99, level: 0.8 }).estimate // [0.62, 0]
 */
export function relativeCurve(
  { model, term, x, anchor, level }: {
    model: FittedModel; term: FittedTerm; x: readonly number[]; anchor: number; level: number;
  },
): BandedCurve {
  const z = normalQuantile(level);
  const values = [...x, anchor];
  const { estimate } = termCurve(model, term.id, { at: values });
  const relative = estimate.slice(0, x.length).map((value) => value - estimate[x.length]);
  const standardError = differenceErrors(model, { term, values });
  return {
    estimate: relative,
    standardError,
    lower: relative.map((value, index) => value - z * standardError[index]),
    upper: relative.map((value, index) => value + z * standardError[index]),
  };
}

/** Standard errors of f(x) - f(last value), for all values but the last. */
function differenceErrors(
  model: FittedModel,
  { term, values }: { term: FittedTerm; values: readonly number[] },
): Float64Array {
  const rows = designRows(model, dataFor(model, { term, values }));
  const own = { ...rows, parts: rows.parts.filter((part) => part.id === term.id) };
  const last = values.length - 1;
  return Float64Array.from({ length: last }, (_, index) => {
    const contrast = new Float64Array(values.length);
    contrast[index] += 1;
    contrast[last] -= 1;
    const gradient = transposeTimes(model, own, contrast);
    return Math.sqrt(Math.max(0, covarianceQuadratic(model, gradient, gradient)));
  });
}

/** Columns for all terms, as the engine asks for; those of the other terms hold any value they know, and do not matter. */
function dataFor(model: FittedModel, { term, values }: { term: FittedTerm; values: readonly number[] }): ModelData {
  const data: Record<string, number[] | string[]> = {};
  for (const {
    columns: [column],
    seen,
  } of model.terms) {
    const [known] = seen.values;
    data[column] = typeof known === "string" ? repeat(known, values.length) : repeat(known, values.length);
  }
  if (model.spec.offset !== undefined) data[model.spec.offset] = values.map(() => 0);
  data[term.columns[0]] = [...values];
  return data;
}

function repeat<Value>(value: Value, times: number): Value[] {
  return new Array<Value>(times).fill(value);
}
