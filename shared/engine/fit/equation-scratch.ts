import { addTransposeTimes, paddedWidth } from "../linalg/sparse-rows";
import { transformRows } from "./change-coordinates";
import type { Design, DesignGroups, DesignTerm } from "./design";

/** Arrays reused from one working model to the next; what they hold is overwritten by each call. */
export type Scratch = { raw: Float64Array; half: Float64Array; weighted: Float64Array; rawVector: Float64Array };

/** @example const scratch = createScratch(design); */
export function createScratch(design: Design): Scratch {
  const widths = [...design.parts, ...(design.groups?.parts ?? [])].map(({ rows }) => paddedWidth(rows));
  const widest = Math.max(...widths);
  const square = Math.max(design.widest * widest, squareOfGroups(design.groups));
  return {
    raw: new Float64Array(square),
    half: new Float64Array(square),
    weighted: new Float64Array(design.rowCount),
    rawVector: new Float64Array(widest),
  };
}

function squareOfGroups(groups: DesignGroups | null): number {
  if (groups === null) return 0;
  const widest = Math.max(...groups.parts.map(ownWidth));
  return Math.max(groups.count, 2) * widest * widest;
}

/** Raw columns of one group of a grouped term. */
export const ownWidth = ({ coordinates }: DesignTerm): number => (coordinates.transform.form === "blocks" ? coordinates.transform.rows : 1);

/**
 * T'X'W(z - shift) of one term, left in `scratch.half`.
 *
 * @param scratch.weighted W(z - shift) per row.
 * @example const own = transformedVector(part, scratch);
 */
export function transformedVector(part: DesignTerm, { rawVector, half, weighted }: Scratch): Float64Array {
  rawVector.fill(0);
  addTransposeTimes(part.rows, weighted, rawVector, 0);
  transformRows(rawVector, 1, part.coordinates, half);
  return half;
}
