import { evenlySpaced } from "../basis/spline-grid";
import { basisRows } from "../basis/term-basis";
import { EngineError } from "../errors";
import type { FittedModel, TermSurface, TermSurfaceOptions } from "../types";
import { checkPoints } from "./curve-points";
import { findTerm } from "./find-term";
import { normalQuantile } from "./level";
import { surfaceSupport } from "./support";
import { bandOver } from "./term-curve";

const defaultLevel = 0.95;
const defaultPoints = 30;
const mostPoints = 300;

/**
 * A tensor product's contribution on the link scale over a grid of its two columns, with a pointwise band: what the columns
 * do together beyond what each does alone.
 *
 * @param options.points a side (default 30, at most 300).
 * @returns grids row-major, the first column's points down, the second's across.
 * @throws EngineError term-unknown, option-invalid.
 * Cost: O(points^2 x 256) + the distinct pairs seen.
 * @example const { x, y, estimate } = termSurface(model, "price:temperature"); estimate[i * y.length + j]; // at x[i], y[j]
 */
export function termSurface(model: FittedModel, termId: string, options: TermSurfaceOptions = {}): TermSurface {
  const term = findTerm(model, termId);
  const { basis } = term;
  if (basis.kind !== "tensor-product") {
    throw new EngineError("option-invalid", `Term "${termId}" is a ${term.kind}, not a surface over two columns; ask for its curve.`);
  }
  const quantile = normalQuantile(options.level ?? defaultLevel);
  const points = checkPoints(options.points ?? defaultPoints, mostPoints);
  const [x, y] = basis.ranges.map((range) => evenlySpaced(range, points));
  const count = points * points;
  const [first, second] = term.columns;
  const data = {
    [first]: Float64Array.from({ length: count }, (_, k) => x[Math.floor(k / points)]),
    [second]: Float64Array.from({ length: count }, (_, k) => y[k % points]),
  };
  const band = bandOver(model, { rows: basisRows(basis, data), first: term.first, count, quantile });
  return { termId, x, y, ...band, supportCount: surfaceSupport(term, { x, y }) };
}
