import type { ModelInformation } from "@shared/engine";
import type { Posterior } from "@shared/engine/inference/posterior";
import { Matrix } from "ml-matrix";

/** All coordinates in one matrix, the groups' first, group by group: X'WX, and the diagonals of each penalty. */
export type Dense = { information: Matrix; penalties: number[][]; groupCount: number; estimate: number[] };

const packed = (row: number, column: number): number => (row >= column ? (row * (row + 1)) / 2 + column : (column * (column + 1)) / 2 + row);

/** Written out plainly, without regard to cost, to hold the block formulas against. */
export function denseOf(information: ModelInformation, { penalties }: Posterior): Dense {
  const { groups, size } = information;
  const width = groups?.size ?? 0;
  const groupCount = (groups?.count ?? 0) * width;
  const matrix = Matrix.zeros(groupCount + size, groupCount + size);
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) matrix.set(groupCount + row, groupCount + column, information.shared[packed(row, column)]);
  }
  for (let line = 0; groups !== null && line < groupCount; line++) {
    const group = Math.floor(line / width);
    for (let k = 0; k < width; k++) {
      matrix.set(line, group * width + k, groups.own[(group * width * (width + 1)) / 2 + packed(line % width, k)]);
    }
    for (let k = 0; k < size; k++) {
      matrix.set(line, groupCount + k, groups.cross[line * size + k]);
      matrix.set(groupCount + k, line, groups.cross[line * size + k]);
    }
  }
  return {
    information: matrix, groupCount,
    estimate: [...(groups?.coordinates ?? []), ...information.coordinates],
    penalties: penalties.map(({ isGrouped, positions, diagonal, multiplier }) => {
      const all = new Array<number>(groupCount + size).fill(0);
      positions.forEach((position, k) => {
        if (!isGrouped) all[groupCount + position] += multiplier * diagonal[k];
        else for (let line = position; line < groupCount; line += width) all[line] += multiplier * diagonal[k];
      });
      return all;
    }),
  };
}

/** S: the sum of the penalties, on a diagonal. */
export const penaltyMatrix = ({ penalties, estimate }: Dense): Matrix =>
  Matrix.diag(estimate.map((_value, k) => penalties.reduce((sum, penalty) => sum + penalty[k], 0)));
