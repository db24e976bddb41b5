import { crossProduct, groupSquare, isSwapped } from "../linalg/cross-products";
import { coordinateWidth, transformColumns, transformRows } from "./change-coordinates";
import type { Design, DesignGroups, DesignTerm } from "./design";
import { ownWidth, transformedVector } from "./equation-scratch";
import type { Scratch } from "./equation-scratch";

/** X'WX and X'Wz for groups: per group X_g'WX_g (both triangles), X_g'WX_shared and X_g'Wz, one after the other. */
export type GroupEquations = { count: number; size: number; own: Float64Array; cross: Float64Array; vector: Float64Array };

/**
 * Products of the terms on groups with themselves and with the shared terms.
 *
 * @param rows.scratch `weighted` holds W(z - shift) per row.
 * @example const groups = groupEquations(design, design.groups, { weights, scratch });
 */
export function groupEquations(
  design: Design, groups: DesignGroups, rows: { weights: Float64Array; scratch: Scratch },
): GroupEquations {
  const { count, size, parts } = groups;
  const out: GroupEquations = {
    count, size,
    own: new Float64Array(count * size * size),
    cross: new Float64Array(count * size * design.size),
    vector: new Float64Array(count * size),
  };
  for (let a = 0; a < parts.length; a++) {
    for (let b = 0; b <= a; b++) addOwnPair(parts[a], parts[b], { ...rows, out });
    for (const shared of design.parts) addCrossPair(parts[a], shared, { ...rows, out, sharedSize: design.size });
    const vector = transformedVector(parts[a], rows.scratch);
    const { positions } = parts[a];
    for (let group = 0; group < count; group++) {
      for (let k = 0; k < positions.length; k++) out.vector[group * size + positions[k]] = vector[group * positions.length + k];
    }
  }
  return out;
}

type GroupTarget = { weights: Float64Array; scratch: Scratch; out: GroupEquations };

/** Diagonal blocks of two terms on the same groups. */
function addOwnPair(left: DesignTerm, right: DesignTerm, target: GroupTarget): void {
  const { raw, half } = target.scratch;
  const { count, size, own } = target.out;
  groupSquare({ rows: left.rows, width: ownWidth(left) }, { rows: right.rows, width: ownWidth(right) }, { count, weights: target.weights }, raw);
  const leftWidth = ownWidth(left);
  const columns = right.positions.length;
  const [ofLeft, ofRight] = [oneGroupOf(left), oneGroupOf(right)];
  const square = leftWidth * ownWidth(right);
  for (let group = 0; group < count; group++) {
    const block = raw.subarray(group * square, (group + 1) * square);
    transformColumns(block, leftWidth, ofRight, half);
    const result = half.subarray(leftWidth * columns);
    transformRows(half, columns, ofLeft, result);
    for (let i = 0; i < left.positions.length; i++) {
      for (let j = 0; j < columns; j++) {
        const value = result[i * columns + j];
        own[(group * size + left.positions[i]) * size + right.positions[j]] = value;
        own[(group * size + right.positions[j]) * size + left.positions[i]] = value;
      }
    }
  }
}

/** A grouped term's coordinates as if it had one group only. */
function oneGroupOf(part: DesignTerm): DesignTerm["coordinates"] {
  const { transform } = part.coordinates;
  if (transform.form !== "blocks") return part.coordinates;
  return { ...part.coordinates, transform: { ...transform, count: 1 }, rawWidth: transform.rows, penalised: transform.columns };
}

function addCrossPair(grouped: DesignTerm, shared: DesignTerm, target: GroupTarget & { sharedSize: number }): void {
  const swapped = isSwapped(grouped.rows, shared.rows);
  const [left, right] = swapped ? [shared, grouped] : [grouped, shared];
  const { raw, half } = target.scratch;
  crossProduct(left.rows, right.rows, target.weights, raw);
  const columns = coordinateWidth(right.coordinates);
  transformColumns(raw, left.coordinates.rawWidth, right.coordinates, half);
  transformRows(half, columns, left.coordinates, raw);
  const { size, count, cross } = target.out;
  const own = grouped.positions.length;
  for (let group = 0; group < count; group++) {
    for (let i = 0; i < own; i++) {
      const at = (group * size + grouped.positions[i]) * target.sharedSize;
      const from = group * own + i;
      for (let j = 0; j < shared.positions.length; j++) {
        cross[at + shared.positions[j]] = swapped ? raw[j * columns + from] : raw[from * columns + j];
      }
    }
  }
}
