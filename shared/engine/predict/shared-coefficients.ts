import { termCoordinates } from "../penalty/term-transform";
import type { TermCoordinates } from "../penalty/term-transform";
import type { FittedModel, FittedTerm } from "../types";
import { sharedCount } from "./model-covariance";

/**
 * Shared coefficients of a vector of shared coordinates: each term by its transform, each curve less its mean over the rows,
 * which the intercept takes up. Linear: what coordinates are to coefficients, their changes and directions are too.
 *
 * @param coordinates of information whose curves per level are centred (`withCentredLevels`). Not changed.
 * @returns one value per shared coefficient. O(coefficients x coordinates of a term).
 * @example sharedCoefficients(model, information.coordinates); // the start of model.coefficients
 */
export const sharedCoefficients = (model: FittedModel, coordinates: Float64Array): Float64Array => sharedMap(model)(coordinates);

/** The map as a function; coordinates of terms are found once for many vectors. */
function sharedMap(model: FittedModel): (coordinates: Float64Array) => Float64Array {
  const size = sharedCount(model);
  const shared = model.terms.filter(({ layout }) => layout.groupFirst === null).map((term) => ({ term, of: termCoordinates(term.basis) }));
  return (coordinates) => applied(shared, coordinates, new Float64Array(size));
}

type PlacedTerm = { term: FittedTerm; of: TermCoordinates };

function applied(shared: readonly PlacedTerm[], coordinates: Float64Array, out: Float64Array): Float64Array {
  out[0] = coordinates[0];
  for (const { term, of } of shared) {
    const own = out.subarray(term.first, term.first + term.count);
    transform(term.layout, of, { coordinates, out: own });
    const { basis } = term;
    if (basis.kind === "levelled-smooth") {
      for (let from = 0; from < own.length; from += basis.size) centre(own.subarray(from, from + basis.size), basis.centring.subarray(from, from + basis.size));
    } else if ("centring" in basis) out[0] += centre(own, basis.centring);
  }
  return out;
}

/** out = transform x the term's coordinates. */
function transform(layout: FittedTerm["layout"], { transform: of, unpenalised, penalised }: TermCoordinates, on: { coordinates: Float64Array; out: Float64Array }): void {
  const { coordinates, out } = on;
  const { unpenalisedFirst, penalisedFirst } = layout;
  const at = (own: number) => coordinates[own < unpenalised ? unpenalisedFirst + own : penalisedFirst + own - unpenalised];
  if (of.form === "scaled") out[0] = of.factor * at(0);
  else if (of.form === "without") {
    for (let k = 0; k < out.length; k++) if (k !== of.leftOut) out[k] = at(k < of.leftOut ? k : k - 1);
  } else if (of.form === "dense") {
    const width = unpenalised + penalised;
    for (let k = 0; k < out.length; k++) for (let own = 0; own < width; own++) out[k] += of.matrix[k * width + own] * at(own);
  } else {
    const { rows, columns, matrix, unpenalised: lines } = of;
    for (let k = 0; k < out.length; k++) {
      const level = Math.floor(k / rows);
      for (let own = 0; own < columns; own++) {
        const position = own < lines ? level * lines + own : unpenalised + level * (columns - lines) + own - lines;
        out[k] += matrix[(k % rows) * columns + own] * at(position);
      }
    }
  }
}

/** Takes the mean from every value, and returns it. */
function centre(values: Float64Array, centring: Float64Array): number {
  let mean = 0;
  for (let k = 0; k < values.length; k++) mean += centring[k] * values[k];
  for (let k = 0; k < values.length; k++) values[k] -= mean;
  return mean;
}

/**
 * A matrix over shared coordinates as one over shared coefficients: map x matrix x map', packed lower triangle.
 *
 * @param matrix symmetric, row-major. O(coefficients x coordinates^2 of the widest term).
 * @example coefficientMatrix(model, posterior.covariance); // times the dispersion: model.covariance
 */
export function coefficientMatrix(model: FittedModel, matrix: Float64Array): Float64Array {
  const size = Math.round(Math.sqrt(matrix.length));
  const rows = sharedCount(model);
  const toCoefficients = sharedMap(model);
  const half = new Float64Array(rows * size);
  for (let column = 0; column < size; column++) {
    // Symmetric: a row is the column.
    toCoefficients(matrix.subarray(column * size, (column + 1) * size)).forEach((value, row) => { half[row * size + column] = value; });
  }
  const packed = new Float64Array((rows * (rows + 1)) / 2);
  for (let row = 0, at = 0; row < rows; row++) {
    const whole = toCoefficients(half.subarray(row * size, (row + 1) * size));
    for (let column = 0; column <= row; column++) packed[at++] = whole[column];
  }
  return packed;
}
