import { termCoordinates } from "../penalty/term-transform";
import type { Posterior } from "./posterior";
import type { TermPlace } from "./term-places";

/** A change of the shared coordinates: a = forwards x c, c = backwards x a, both row-major size x size. */
export type CoordinateBasis = { forwards: Float64Array; backwards: Float64Array };

/** One centred curve: its coordinates' positions, and its splines' coefficients = matrix x coordinates, rows x columns. */
type Curve = { positions: number[]; matrix: Float64Array; rows: number; columns: number; centring: Float64Array };

/**
 * The basis in which the published correction for chosen penalties takes its Cholesky factor, which depends on it: the
 * intercept and terms under no penalty first, then each curve by its splines' own coefficients with the centring taken
 * out by a Householder reflection. Kinds without splines keep their coordinates.
 * Source: Wood (2017), Generalized Additive Models (2nd ed.), section 5.4.1.
 *
 * @example splineBasis(posterior, places).forwards[0]; // 1: the intercept stays
 */
export function splineBasis({ size }: Posterior, places: readonly TermPlace[]): CoordinateBasis {
  const forwards = new Float64Array(size * size);
  const backwards = new Float64Array(size * size);
  const curves = places.flatMap(curvesOf);
  const turned = new Set(curves.flatMap(({ positions }) => positions));
  const unpenalised = places.filter((place) => !place.isGrouped && place.unpenalised === place.positions.length).flatMap(({ positions }) => positions);
  const rest = Array.from({ length: size }, (_, k) => k).filter((k) => k > 0 && !turned.has(k) && !unpenalised.includes(k));
  let next = 0;
  for (const position of [0, ...unpenalised, ...rest]) {
    forwards[position * size + next] = 1;
    backwards[next * size + position] = 1;
    next++;
  }
  for (const curve of curves) {
    writeCurve(curve, next, { forwards, backwards }, size);
    next += curve.positions.length;
  }
  return { forwards, backwards };
}

function curvesOf(place: TermPlace): Curve[] {
  const { term, positions, own, isGrouped } = place;
  const { basis } = term;
  if (isGrouped || !("centring" in basis) || place.unpenalised === positions.length) return [];
  const { transform, unpenalised, penalised } = termCoordinates(basis);
  if (positions.length < unpenalised + penalised || basis.kind === "random-walk") return [];
  if (transform.form === "dense") {
    return [{ positions, matrix: transform.matrix, rows: basis.centring.length, columns: own.length, centring: basis.centring }];
  }
  if (transform.form !== "blocks") return [];
  const { rows, columns, count, matrix, unpenalised: lines } = transform;
  return Array.from({ length: count }, (_, level) => ({
    matrix, rows, columns,
    positions: Array.from({ length: columns }, (_column, k) =>
      positions[k < lines ? level * lines + k : unpenalised + level * (columns - lines) + k - lines]),
    centring: basis.centring.subarray(level * rows, (level + 1) * rows),
  }));
}

/**
 * With the splines' means m and coefficients T a + constant, c = Z'(T a - 1 m'T a) (m sums to one) and a = D^-1 T'Z c,
 * D = T'T diagonal; Z are the later columns of the reflection that turns m into the first axis.
 */
function writeCurve(curve: Curve, first: number, { forwards, backwards }: CoordinateBasis, size: number): void {
  const { positions, matrix, rows, columns, centring } = curve;
  const length = Math.sqrt(centring.reduce((sum, value) => sum + value * value, 0));
  const reflected = Float64Array.from(centring, (value, k) => (k === 0 ? value + length : value));
  const halfSquare = length * (length + centring[0]);
  for (let k = 0; k < columns; k++) {
    let square = 0;
    let mean = 0;
    let along = 0;
    let alongOnes = 0;
    for (let i = 0; i < rows; i++) {
      const value = matrix[i * columns + k];
      square += value * value;
      mean += centring[i] * value;
      along += reflected[i] * value;
      alongOnes += reflected[i];
    }
    for (let j = 0; j < columns; j++) {
      const value = matrix[(j + 1) * columns + k];
      const weight = reflected[j + 1] / halfSquare;
      forwards[positions[k] * size + first + j] = (value - along * weight) / square;
      backwards[(first + j) * size + positions[k]] = value - mean - (along - mean * alongOnes) * weight;
    }
  }
}
