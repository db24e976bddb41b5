import { EngineError } from "../errors";
import type { FittedTerm, TermCurveOptions } from "../types";

const defaultPoints = 100;
const mostPoints = 100_000;

/**
 * The values a term's curve is drawn at: those asked for; else every level, group or week; else evenly spaced points over
 * the observed range, on the scale of the basis (on a circle over its period).
 *
 * @returns values in the column's own unit, or names.
 * @throws EngineError option-invalid.
 * @example curvePoints(term, { points: 3 }); // ends and middle of the range
 */
export function curvePoints(term: FittedTerm, { at, points = defaultPoints }: TermCurveOptions): Float64Array | string[] {
  const { basis } = term;
  if (basis.kind === "factor" || basis.kind === "random-effect") return at === undefined ? [...basis.levels] : Array.from(at, String);
  if (at !== undefined) {
    return Float64Array.from(Array.from<number | string>(at), (value) => {
      if (typeof value === "number") return value;
      throw new EngineError("option-invalid", `at holds ${JSON.stringify(value)}; term "${term.id}" needs numbers.`);
    });
  }
  if (basis.kind === "random-walk") return Float64Array.from({ length: basis.last - basis.first + 1 }, (_, k) => basis.first + k);
  return spacedOver(term, checkPoints(points, mostPoints));
}

/**
 * A number of points.
 *
 * @throws EngineError option-invalid unless a whole number from 2 to `most`.
 * @example checkPoints(100, 1000); // 100
 */
export function checkPoints(points: number, most: number): number {
  if (Number.isInteger(points) && points >= 2 && points <= most) return points;
  throw new EngineError("option-invalid", `points is ${points}; it must be a whole number from 2 to ${most}.`);
}

function spacedOver({ basis, observedRange }: FittedTerm, points: number): Float64Array {
  const [from, to] = basis.kind === "cyclic-smooth" ? [basis.lower, basis.upper] : (observedRange ?? [0, 0]);
  const isLog = "log" in basis && basis.log;
  const start = isLog ? Math.log(from) : from;
  const width = (isLog ? Math.log(to) : to) - start;
  const x = new Float64Array(points);
  for (let k = 0; k < points; k++) {
    const value = start + (width * k) / (points - 1);
    x[k] = isLog ? Math.exp(value) : value;
  }
  x[0] = from;
  x[points - 1] = to;
  return x;
}
