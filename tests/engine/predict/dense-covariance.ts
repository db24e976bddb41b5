import { covarianceQuadratic } from "@shared/engine";
import type { DesignRows, FittedModel } from "@shared/engine";
import { gatherRow } from "@shared/engine/linalg/sparse-rows";
import { EigenvalueDecomposition, Matrix } from "ml-matrix";

/** All coefficients' covariance, row-major, entry by entry from unit vectors. */
export function denseCovariance(model: FittedModel): Float64Array {
  const size = model.coefficients.length;
  const units = Array.from({ length: size }, (_, k) => Float64Array.from({ length: size }, (__, i) => Number(i === k)));
  return Float64Array.from({ length: size * size }, (_, at) => covarianceQuadratic(model, units[Math.floor(at / size)], units[at % size]));
}

/** Each row of a design over all coefficients. */
export function denseRows({ parts, count }: DesignRows, size: number): Float64Array[] {
  return Array.from({ length: count }, (_, row) => {
    const gathered = { indices: new Int32Array(size * parts.length), values: new Float64Array(size * parts.length), count: 0 };
    for (const part of parts) gathered.count = gatherRow(part.rows, row, part.first, gathered);
    const whole = new Float64Array(size);
    for (let k = 0; k < gathered.count; k++) whole[gathered.indices[k]] += gathered.values[k];
    return whole;
  });
}

export const smallestEigenvalue = (matrix: Float64Array, size: number): number =>
  Math.min(...new EigenvalueDecomposition(Matrix.from1DArray(size, size, matrix), { assumeSymmetric: true }).realEigenvalues);
