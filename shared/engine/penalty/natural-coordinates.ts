import { writeKnotSplines } from "../basis/knot-spline";
import { orthonormalComplement } from "../linalg/orthonormal-complement";
import { unpenalisedCoordinates } from "./coordinates";
import type { TermCoordinates } from "./coordinates";

/**
 * Coordinates of the natural cubic splines on given knots without the constant: an orthonormal basis of the coefficients
 * whose curve has no second derivative at either boundary knot, and that are orthogonal to those of the constant.
 * Source: de Boor (1978), ch. IV (natural end conditions), as a null space: Wood (2017), section 1.8.1.
 *
 * @param knots ascending, all different, boundary knots once.
 * @example naturalCoordinates(Float64Array.of(0, 1, 2)).unpenalised; // 2
 */
export function naturalCoordinates(knots: Float64Array): TermCoordinates {
  const size = knots.length + 2;
  const constant = new Float64Array(size).fill(1);
  const vectors = [secondDerivativeAt(knots, 0), secondDerivativeAt(knots, knots.length - 1), constant].map(unitLength);
  return unpenalisedCoordinates({ form: "dense", matrix: orthonormalComplement(vectors, size) }, size, size - 3);
}

/** The second derivatives of all splines at a boundary knot. */
function secondDerivativeAt(knots: Float64Array, position: number): Float64Array {
  const interval = Math.min(position, knots.length - 2);
  const derivatives = new Float64Array(knots.length + 2);
  writeKnotSplines(knots, interval, { x: knots[position], order: 2, out: derivatives, start: interval });
  return derivatives;
}

function unitLength(vector: Float64Array): Float64Array {
  const length = Math.hypot(...vector);
  return vector.map((value) => value / length);
}
