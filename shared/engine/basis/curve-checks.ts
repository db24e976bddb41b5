import { EngineError } from "../errors";
import type { ModelWarning } from "../types";

/**
 * Size of a spline basis as asked for.
 *
 * @throws EngineError spec-invalid unless a whole number from 4 to 200.
 * @example checkSize(10, "price"); // 10
 */
export function checkSize(size: number, id: string): number {
  if (!Number.isInteger(size) || size < 4 || size > 200) {
    throw new EngineError("spec-invalid", `Term "${id}": size is ${size}; it must be a whole number from 4 to 200.`);
  }
  return size;
}

/** Squares of a column's width must not vanish. */
const leastWidth = 1e-50;

/**
 * Whether a column varies enough to carry a curve.
 *
 * @param distinct its distinct values, ascending.
 * @throws EngineError column-constant, column-few-values.
 * @example checkDistinct(Float64Array.of(1, 2, 3, 4), "price", "price");
 */
export function checkDistinct(distinct: Float64Array, column: string, id: string): void {
  const count = distinct.length;
  if (count === 1) {
    throw new EngineError("column-constant", `Term "${id}": column "${column}" is constant (${distinct[0]}); a curve needs values that vary.`);
  }
  if (distinct[count - 1] - distinct[0] < leastWidth) {
    throw new EngineError(
      "column-constant",
      `Term "${id}": column "${column}" runs from ${distinct[0]} to ${distinct[count - 1]}; a curve needs values at least ${leastWidth} apart.`,
    );
  }
  if (count < 4) {
    throw new EngineError(
      "column-few-values",
      `Term "${id}": column "${column}" has ${count} distinct values; a curve needs at least 4. Use a straight line or a factor.`,
    );
  }
}

/**
 * Fewer distinct values than splines: the penalty carries the fit between them, which deserves a word.
 *
 * @example fewValuesWarning(6, 10, "price").length; // 1
 */
export function fewValuesWarning(distinct: number, size: number, id: string): ModelWarning[] {
  if (distinct >= size) return [];
  return [{
    code: "few-distinct-values",
    term: id,
    message: `Term "${id}" has ${distinct} distinct values for a curve of size ${size}: between them its shape comes from the smoothness penalty alone.`,
  }];
}
