/**
 * Coordinates under one penalty, turned so that their information (all others eliminated) is diagonal and the penalty the
 * identity; `others`, what further penalties hold the same coordinates by (before they were turned), in units of this one.
 */
export type PenalisedBlock = { information: Float64Array; estimates: Float64Array; others: Float64Array };

/** `residual` D + b'Sb at the estimate; `degreesOfFreedom` n less unpenalised coordinates, null where the dispersion is known. */
export type PenaltySetting = { multiplier: number; dispersion: number; residual: number; degreesOfFreedom: number | null };

/** From a penalty that halves, in log units: so far down, and up, as the posterior is looked at. */
const downwards = 20;
const upwards = 16;
const widestStep = 0.5;

/**
 * Mean of dispersion x [C(rho) - C(estimate)] + (b(rho) - b)(b(rho) - b)' of a block by the posterior of its log penalty.
 * Each coordinate by itself: C = 1 / (h + lambda), b(lambda) = b (h + estimate) / (h + lambda); the criterion follows from the
 * same sums. Weights fall off as a normal's of spread sqrt(2 / coordinates) at the least, so equal steps of that are exact
 * to rounding.
 *
 * @returns row-major, coordinates x coordinates. O(grid x coordinates^2).
 * @example averageOver({ information, estimates, others }, { multiplier: 3, dispersion: 1, residual: 90, degreesOfFreedom: null });
 */
export function averageOver(block: PenalisedBlock, setting: PenaltySetting): Float64Array {
  const { information, estimates } = block;
  const { multiplier, dispersion } = setting;
  const width = information.length;
  const grid = penaltyGrid(block, multiplier);
  const criteria = grid.map((rho) => criterionAt(block, setting, Math.exp(rho)) + rho / 2);
  const least = criteria.reduce((best, value) => Math.min(best, value), Infinity);
  const out = new Float64Array(width * width);
  const moves = new Float64Array(width);
  let total = 0;
  grid.forEach((rho, at) => {
    const weight = Math.exp(least - criteria[at]);
    if (weight < 1e-12) return;
    total += weight;
    const penalty = Math.exp(rho);
    for (let k = 0; k < width; k++) {
      const [now, then] = [information[k] + penalty, information[k] + multiplier];
      moves[k] = estimates[k] * (then / now - 1);
      out[k * width + k] += weight * dispersion * (1 / now - 1 / then);
    }
    for (let row = 0; row < width; row++) for (let k = 0; k < width; k++) out[row * width + k] += weight * moves[row] * moves[k];
  });
  return out.map((value) => value / total);
}

function penaltyGrid({ information }: PenalisedBlock, multiplier: number): Float64Array {
  const width = information.length;
  const middle = Math.log(Math.max(information.reduce((sum, value) => sum + value, 0) / width, 1e-12 * multiplier));
  const from = Math.min(middle - downwards, Math.log(multiplier) - downwards / 2);
  const step = Math.min(widestStep, Math.sqrt(2 / width));
  return Float64Array.from({ length: Math.ceil((middle + upwards - from) / step) + 1 }, (_, k) => from + k * step);
}

/** Restricted likelihood criterion at a penalty, less what does not depend on it. */
function criterionAt({ information, estimates, others }: PenalisedBlock, setting: PenaltySetting, penalty: number): number {
  const { multiplier, residual, dispersion, degreesOfFreedom } = setting;
  let change = 0;
  let logs = 0;
  for (let k = 0; k < information.length; k++) {
    const [now, then] = [information[k] + penalty, information[k] + multiplier];
    change += estimates[k] * estimates[k] * then * (1 - then / now);
    logs += Math.log(now) - Math.log(penalty + others[k]);
  }
  const fit = degreesOfFreedom === null ? change / dispersion : degreesOfFreedom * Math.log1p(Math.max(change / residual, -1 + 1e-12));
  return (fit + logs) / 2;
}
