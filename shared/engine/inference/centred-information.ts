import { packedIndex } from "../linalg/packed-symmetric";
import { termCoordinates } from "../penalty/term-transform";
import type { ModelInformation } from "../types";
import type { TermPlace } from "./term-places";

/**
 * X'WX of a term's columns as they stand in the model: centred over the rows where the kind is. Fitting coordinates are not
 * centred (the intercept makes up for it), tests are of what is.
 *
 * @param information with curves per level centred already, as `withCentredLevels` gives.
 * @param place of a term whose coordinates are shared.
 * @returns row-major, positions x positions. O(positions^2).
 * @example centredInformation(information, place)[0]; // weighted sum of squares of the first centred column
 */
export function centredInformation({ shared }: ModelInformation, place: TermPlace): Float64Array {
  const { positions } = place;
  const width = positions.length;
  const means = columnMeans(place);
  const matrix = new Float64Array(width * width);
  for (let row = 0; row < width; row++) {
    for (let column = 0; column < width; column++) {
      matrix[row * width + column] = shared[packedIndex(positions[row], positions[column])]
        + means[row] * means[column] * shared[0]
        - means[row] * shared[packedIndex(0, positions[column])] - means[column] * shared[packedIndex(0, positions[row])];
    }
  }
  return matrix;
}

/** Mean over the rows of each of the term's columns that the intercept has taken up; 0 for kinds that are not centred. */
function columnMeans({ term, own }: TermPlace): Float64Array {
  const { basis } = term;
  const means = new Float64Array(own.length);
  if (!("centring" in basis)) return means;
  const { transform, unpenalised, penalised } = termCoordinates(basis);
  if (transform.form !== "dense") return means;
  const width = unpenalised + penalised;
  return means.map((_zero, at) => {
    let sum = 0;
    for (let k = 0; k < basis.centring.length; k++) sum += basis.centring[k] * transform.matrix[k * width + own[at]];
    return sum;
  });
}
