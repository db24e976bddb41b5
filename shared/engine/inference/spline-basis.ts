import { termCoordinates } from "../penalty/term-transform";
import type { Posterior } from "./posterior";
import type { TermPlace } from "./term-places";

/** A change of the shared coordinates: a = forwards x c, c = backwards x a, both row-major size x size. */
export type CoordinateBasis = { forwards: Float64Array; backwards: Float64Array };

/**
 * One curve: its coordinates' positions, and its splines' coefficients = matrix x coordinates, rows x columns; `centring`
 * null where it keeps its constant.
 */
type Curve = { positions: number[]; matrix: Float64Array; rows: number; columns: number; centring: Float64Array | null };

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

/**
 * A direction in a term's coordinates that is no one's choice: of each of its curves the first coefficient of the basis
 * above; the first coordinate for kinds without.
 *
 * @returns one value per entry of `place.positions`.
 * @example firstDirection(place)[0];
 */
export function firstDirection(place: TermPlace): Float64Array {
  const { positions } = place;
  const width = positions.length;
  const curves = curvesOf(place);
  if (curves.length === 0) return Float64Array.from(positions, (_position, k) => (k === 0 ? 1 : 0));
  const forwards = new Float64Array(width * width);
  const at = new Map(positions.map((position, k) => [position, k]));
  for (const curve of curves) {
    const within = curve.positions.map((position) => at.get(position) ?? 0);
    writeCurve({ ...curve, positions: within }, 0, { forwards, backwards: new Float64Array(width * width) }, width);
  }
  return Float64Array.from(positions, (_position, k) => forwards[k * width]);
}

function curvesOf(place: TermPlace): Curve[] {
  const { term, positions, own, isGrouped } = place;
  const { basis } = term;
  const { transform, unpenalised, penalised } = termCoordinates(basis);
  if (isGrouped || positions.length < unpenalised + penalised) return [];
  if (transform.form === "dense" && (basis.kind === "smooth" || basis.kind === "cyclic-smooth" || basis.kind === "scaled-smooth")) {
    const centring = basis.kind === "scaled-smooth" ? null : basis.centring;
    return [{ positions, matrix: transform.matrix, rows: basis.size, columns: own.length, centring }];
  }
  if (transform.form !== "blocks" || basis.kind !== "levelled-smooth") return [];
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
  // Without centring nothing is reflected, and no spline's coefficient is left out.
  const means = centring ?? new Float64Array(rows);
  const length = Math.sqrt(means.reduce((sum, value) => sum + value * value, 0));
  const reflected = means.map((value, k) => (k === 0 ? value + length : value));
  const halfSquare = centring === null ? 1 : length * (length + means[0]);
  const skipped = centring === null ? 0 : 1;
  for (let k = 0; k < columns; k++) {
    let square = 0;
    let mean = 0;
    let along = 0;
    let alongOnes = 0;
    for (let i = 0; i < rows; i++) {
      const value = matrix[i * columns + k];
      square += value * value;
      mean += means[i] * value;
      along += reflected[i] * value;
      alongOnes += reflected[i];
    }
    for (let j = 0; j < columns; j++) {
      const value = matrix[(j + skipped) * columns + k];
      const weight = reflected[j + skipped] / halfSquare;
      forwards[positions[k] * size + first + j] = (value - along * weight) / square;
      backwards[(first + j) * size + positions[k]] = value - mean - (along - mean * alongOnes) * weight;
    }
  }
}
