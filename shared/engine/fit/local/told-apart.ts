import { EngineError } from "../../errors";
import { choleskyDropping } from "../../linalg/dropping-cholesky";
import type { NormalEquations } from "../normal-equations";
import type { LocalPart, PooledDesign } from "./pooled-design";

/** A column that is drawn without penalty: a coordinate, or a power of a local regression's column at its points. */
type FreeColumn = { id: string; local: LocalPart | null; first: number; values: Float64Array };

/**
 * Refuses terms that draw the same line as a local regression. A local line gives every straight line in its column back
 * unchanged (a local parabola parabolas too), so that such a line has no place of its own: the joint system is singular
 * exactly where unpenalised columns and these powers depend on one another (Buja, Hastie & Tibshirani 1989, Ann. Statist.
 * 17, theorem 5). Constants are the intercept's.
 *
 * @param equations cross-products of the pooled design.
 * @throws EngineError spec-invalid, naming both terms.
 * Cost: O(points^2 x columns).
 * @example checkToldApart(layout, equations);
 */
export function checkToldApart(layout: PooledDesign, equations: NormalEquations): void {
  const columns = freeColumns(layout);
  const size = columns.length;
  const products = new Float64Array(size * size);
  columns.forEach((left, a) => {
    for (let b = 0; b <= a; b++) products[a * size + b] = productOf(left, columns[b], equations.matrix, layout.size);
  });
  for (const { column, dependsOn } of choleskyDropping(products, size, null)) {
    const own = columns[column];
    const other = dependsOn.map((earlier) => columns[earlier]).find(({ id, local }) => id !== own.id && (local !== null || own.local !== null) && id !== "intercept");
    if (other !== undefined) refuse(own, other);
  }
}

/** The intercept, the local regressions' powers, then every other unpenalised coordinate. */
function freeColumns({ design, locals }: PooledDesign): FreeColumn[] {
  const powers = locals.flatMap(powersOf);
  const coordinates = design.parts.flatMap((part) => Array.from({ length: part.coordinates.unpenalised }, (_, k): FreeColumn => (
    { id: part.id, local: null, first: part.unpenalisedFirst + k, values: Float64Array.of(1) }
  )));
  return [...coordinates.slice(0, 1), ...powers, ...coordinates.slice(1)];
}

/** Powers up to the degree, about the points' mean and per their spread. */
function powersOf(local: LocalPart): FreeColumn[] {
  const { id, first, basis: { at, degree } } = local;
  const mean = at.reduce((sum, value) => sum + value, 0) / at.length;
  const spread = at[at.length - 1] - at[0];
  return Array.from({ length: degree }, (_, power) => ({ id, local, first, values: at.map((value) => ((value - mean) / spread) ** (power + 1)) }));
}

function productOf(left: FreeColumn, right: FreeColumn, matrix: Float64Array, size: number): number {
  let sum = 0;
  for (let i = 0; i < left.values.length; i++) {
    for (let j = 0; j < right.values.length; j++) {
      const row = left.first + i;
      const column = right.first + j;
      const weight = matrix[row >= column ? row * size + column : column * size + row];
      if (weight !== 0) sum += weight * left.values[i] * right.values[j];
    }
  }
  return sum;
}

function refuse(own: FreeColumn, other: FreeColumn): never {
  const degree = Math.max(own.local?.basis.degree ?? 0, other.local?.basis.degree ?? 0);
  const drawn = degree === 1 ? "straight lines" : "straight lines and parabolas";
  throw new EngineError(
    "spec-invalid",
    `Terms "${own.id}" and "${other.id}" cannot be told apart: a local regression of degree ${degree} draws ${drawn} itself. Leave one of them out, or give the local regression degree 0.`,
  );
}
