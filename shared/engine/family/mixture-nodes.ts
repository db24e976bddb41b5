import { exponential } from "./exponential";
import { normalRule } from "./normal-nodes";

/** A mixture over the uncertain mean: the first `count` entries of each array are nodes, means ascending. */
export type MixtureNodes = { count: number; means: Float64Array; ratios: Float64Array; weights: Float64Array };

/** Gauss-Hermite nodes that leave less than 1e-10 of a probability out, by how wide the uncertainty is beside the noise. */
const rules: readonly { upTo: number; count: number }[] = [
  { upTo: 0, count: 1 }, { upTo: 0.1, count: 5 }, { upTo: 0.35, count: 9 }, { upTo: 0.75, count: 15 },
];

/** Wider than this, the uncertainty is all that matters, and nodes would have to be ever closer. */
export const widestMixture = 20;

/** Beyond, evenly spaced ones do as much: over this many standard errors either way, this many noise's widths apart. */
const reach = 7;
const spacing = 0.95;

/** How much closer for amounts, whose ends are wanted to nine digits and not to the next whole number. */
const finerForAmounts = 1.6;

/** Most nodes a mixture has. */
export const mostNodes = 2 * Math.ceil((finerForAmounts * reach * Math.hypot(1, widestMixture)) / spacing) + 1;
const scratch: MixtureNodes = {
  count: 0, means: new Float64Array(mostNodes), ratios: new Float64Array(mostNodes), weights: new Float64Array(mostNodes),
};

/**
 * Nodes of eta ~ N(linear predictor, standard error^2) under a log link, as many as it takes: the probability that a new row is at
 * most some value falls with eta over about the noise's relative width, and the nodes must be closer than that.
 * Sources: Golub & Welsch (1969); Trefethen & Weideman (2014), SIAM Review 56, 385-458, for the evenly spaced ones.
 *
 * @param row `width`: standard error over the noise's relative width, up to `widestMixture`; `fractional`: amounts, not counts.
 * @param ratioOf variance over mean of a new row with this mean.
 * @returns arrays that the next call fills again.
 * @example mixtureNodes({ linearPredictor: 3, standardError: 0.1, width: 0.3, fractional: false }, () => 2).count; // 9
 */
export function mixtureNodes(
  row: { linearPredictor: number; standardError: number; width: number; fractional: boolean }, ratioOf: (mean: number) => number,
): MixtureNodes {
  const finer = row.fractional ? finerForAmounts : 1;
  const rule = rules.find(({ upTo }) => row.width * finer <= upTo);
  if (rule === undefined) placeEvenly(spacing / (finer * Math.hypot(1, row.width)));
  else placeByRule(rule.count);
  const { count, means, ratios } = scratch;
  for (let j = 0; j < count; j++) {
    means[j] = exponential(row.linearPredictor + row.standardError * means[j]);
    ratios[j] = ratioOf(means[j]);
  }
  return scratch;
}

/** Standard normal nodes, for the present in the place of the means. */
function placeByRule(count: number): void {
  const { nodes, weights } = normalRule(count);
  scratch.count = count;
  scratch.means.set(nodes);
  scratch.weights.set(weights);
}

function placeEvenly(step: number): void {
  const half = Math.min((mostNodes - 1) / 2, Math.ceil(reach / step));
  scratch.count = 2 * half + 1;
  let sum = 0;
  for (let j = 0; j < scratch.count; j++) {
    const node = (j - half) * step;
    scratch.means[j] = node;
    sum += scratch.weights[j] = Math.exp(-0.5 * node * node);
  }
  for (let j = 0; j < scratch.count; j++) scratch.weights[j] /= sum;
}
