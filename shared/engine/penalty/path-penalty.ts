import { ridgeCoordinates } from "./coordinates";
import type { TermCoordinates } from "./coordinates";

/**
 * Coordinates of a random walk over `size` weeks without its constant, in which the penalty on first differences is the
 * identity. D'D is the Laplacian of a path: its eigenvectors are the cosines sqrt(2 / size) cos(pi k (i + 1/2) / size), its
 * eigenvalues 4 sin^2(pi k / (2 size)), k = 1 to size - 1; each vector is divided by the root of its eigenvalue.
 * Source: Strang (1999), The Discrete Cosine Transform, SIAM Review 41 (DCT-2). O(size^2).
 *
 * @example pathCoordinates(121).penalised; // 120
 */
export function pathCoordinates(size: number): TermCoordinates {
  const width = size - 1;
  const matrix = new Float64Array(size * width);
  const scales = Float64Array.from({ length: width }, (_, k) => Math.sqrt(2 / size) / (2 * Math.sin((Math.PI * (k + 1)) / (2 * size))));
  // cos(pi m / (2 size)) takes 4 size values, found once.
  const cosines = Float64Array.from({ length: 4 * size }, (_, m) => Math.cos((Math.PI * m) / (2 * size)));
  for (let i = 0; i < size; i++) {
    for (let k = 0; k < width; k++) matrix[i * width + k] = scales[k] * cosines[((k + 1) * (2 * i + 1)) % (4 * size)];
  }
  return ridgeCoordinates({ form: "dense", matrix }, size, { unpenalised: 0, penalised: width });
}
