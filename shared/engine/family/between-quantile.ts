import quantile from "@stdlib/stats-base-dists-normal-quantile";

/** Beyond this a probability cannot be told from 0 or 1; its normal quantile is 8.2. */
const smallest = 1e-16;

/**
 * Standard normal quantile of the probability at share `uniform` of the way from `below` to `atMost`, within 8.2 of 0.
 * Source: Dunn & Smyth (1996), J. Comput. Graph. Statist. 5, 236-244.
 *
 * @param place probability below the response, and at most it.
 * @example betweenQuantile({ below: 0.25, atMost: 0.75 }, 0.5); // 0
 */
export function betweenQuantile(place: { below: number; atMost: number }, uniform: number): number {
  const probability = place.below + uniform * (place.atMost - place.below);
  return quantile(Math.min(1 - smallest, Math.max(smallest, probability)), 0, 1);
}
