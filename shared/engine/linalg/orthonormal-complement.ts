/**
 * Orthonormal vectors that span everything orthogonal to the vectors given, by Householder reflections: the last columns of
 * the full Q of their QR factorisation. O(size^2 x vectors).
 * Source: Golub & Van Loan (1996), section 5.2.1.
 *
 * @param vectors linearly independent, each of length `size`. Not changed.
 * @returns row-major size x (size - vectors), its columns orthonormal.
 * @example orthonormalComplement([Float64Array.of(1, 0)], 2); // 0, 1 (or 0, -1)
 */
export function orthonormalComplement(vectors: readonly Float64Array[], size: number): Float64Array {
  const reflections: Float64Array[] = [];
  for (const vector of vectors) {
    const rest = vector.slice();
    for (const reflection of reflections) reflect(rest, reflection);
    rest.fill(0, 0, reflections.length);
    reflections.push(reflectionOf(rest, reflections.length));
  }
  const width = size - vectors.length;
  const complement = new Float64Array(size * width);
  const unit = new Float64Array(size);
  for (let column = 0; column < width; column++) {
    unit.fill(0);
    unit[vectors.length + column] = 1;
    for (let k = reflections.length - 1; k >= 0; k--) reflect(unit, reflections[k]);
    for (let row = 0; row < size; row++) complement[row * width + column] = unit[row];
  }
  return complement;
}

/** The unit vector v with which I - 2vv' turns `rest` into a multiple of the unit vector `pivot`. */
function reflectionOf(rest: Float64Array, pivot: number): Float64Array {
  const normal = rest.slice();
  normal[pivot] += (rest[pivot] < 0 ? -1 : 1) * Math.hypot(...rest);
  const length = Math.hypot(...normal);
  return normal.map((value) => value / length);
}

function reflect(vector: Float64Array, normal: Float64Array): void {
  let across = 0;
  for (let k = 0; k < vector.length; k++) across += vector[k] * normal[k];
  for (let k = 0; k < vector.length; k++) vector[k] -= 2 * across * normal[k];
}
