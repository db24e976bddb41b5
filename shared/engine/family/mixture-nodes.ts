import { exponential } from "./exponential";
import { normalRule } from "./normal-nodes";

/** A mixture over the uncertain mean: the first `count` entries of each array are nodes, means ascending. */
export type MixtureNodes = { count: number; means: Float64Array; ratios: Float64Array; weights: Float64Array };

/** Nodes that leave less than 1e-11 of a probability out, by how wide the uncertainty is beside the noise. */
const rules: readonly { upTo: number; count: number }[] = [
  { upTo: 0, count: 1 }, { upTo: 0.05, count: 5 }, { upTo: 0.2, count: 9 }, { upTo: Infinity, count: 15 },
];

/** Most nodes a mixture has. */
export const mostNodes = 15;
const scratch: MixtureNodes = {
  count: 0, means: new Float64Array(mostNodes), ratios: new Float64Array(mostNodes), weights: new Float64Array(mostNodes),
};

/**
 * Nodes of eta ~ N(linear predictor, standard error^2) under a log link.
 *
 * @param row `fractional`: small gammas need every node, as their lower tails magnify what is left out.
 * @param ratioOf variance over mean of a new row with this mean.
 * @returns arrays that the next call fills again.
 * @example mixtureNodes({ linearPredictor: 3, standardError: 0.1, fractional: false }, () => 2).count; // 15
 */
export function mixtureNodes(
  row: { linearPredictor: number; standardError: number; fractional: boolean }, ratioOf: (mean: number) => number,
): MixtureNodes {
  const { linearPredictor, standardError, fractional } = row;
  const mean = exponential(linearPredictor);
  const shape = mean / ratioOf(mean);
  const width = fractional && shape < 10 && standardError > 0 ? Infinity : standardError * Math.sqrt(shape);
  const { count } = rules.find(({ upTo }) => width <= upTo) ?? rules[rules.length - 1];
  const rule = normalRule(count);
  scratch.count = count;
  for (let j = 0; j < count; j++) {
    scratch.weights[j] = rule.weights[j];
    scratch.means[j] = exponential(linearPredictor + standardError * rule.nodes[j]);
    scratch.ratios[j] = ratioOf(scratch.means[j]);
  }
  return scratch;
}
