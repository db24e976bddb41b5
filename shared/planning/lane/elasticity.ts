import { normalQuantile, termCurve } from "../../engine";
import type { Interval } from "../scenario/scenario";
import { membersOf } from "./lane-term";
import type { LaneStore } from "./lane-term";

/**
 * The own-price elasticity at a price: the slope d ln(units) / d ln(price) of the curve that the price lane draws. Over several
 * stores it is the mean of their slopes weighted by w exp(f), their base units times their multiplier at that price.
 *
 * @param level probability of the interval, estimate +- z x standard error, the weights taken as given and stores' models as
 * independent.
 * @returns null where no selected store's model has a curve or line of price.
 * @throws EngineError "value-not-positive" for a price that is not above zero.
 * @example elasticityAt({ stores: [{ store: "S1", model, baseUnits: 420 }], price: 1.49, level: 0.8 })?.estimate // -2.3
 */
export function elasticityAt(
  { stores, price, level }: { stores: readonly LaneStore[]; price: number; level: number },
): Interval | null {
  let units = 0;
  let slopes = 0;
  let variance = 0;
  for (const { model, term, baseUnits } of membersOf(stores, "price").members) {
    // Of depth, ln(price / regular price), the slope by its own logarithm is no elasticity.
    if (term.columns[0] !== "price") continue;
    const { estimate, derivative } = termCurve(model, term.id, { at: [price], derivative: true });
    if (derivative === undefined) continue;
    const own = baseUnits * Math.exp(estimate[0]);
    units += own;
    slopes += own * derivative.estimate[0];
    variance += (own * derivative.standardError[0]) ** 2;
  }
  if (!(units > 0)) return null;
  const [slope, half] = [slopes / units, (normalQuantile(level) * Math.sqrt(variance)) / units];
  return { estimate: slope, lower: slope - half, upper: slope + half };
}
