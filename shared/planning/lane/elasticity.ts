import { normalQuantile } from "../../engine";
import type { Interval } from "../scenario/scenario";
import { curveWithKnown, varianceOfSum } from "../sum-over-stores";
import type { PartVariance } from "../sum-over-stores";
import { membersOf } from "./lane-term";
import type { LaneStore } from "./lane-term";

/**
 * The own-price elasticity at a price: the slope d ln(units) / d ln(price) of the curve that the price lane draws. Over several
 * stores it is the mean of their slopes weighted by w exp(f), their base units times their multiplier at that price.
 *
 * @param level probability of the interval, estimate +- z x standard error, the weights taken as given and stores' errors
 * added up as `varianceOfSum` does.
 * @returns null where no selected store's model has a curve or line of price.
 * @throws EngineError "value-not-positive" for a price that is not above zero.
 * @example elasticityAt({ stores: [{ store: "S1", model, baseUnits: 420 }], price: 1.49, level: 0.8 })?.estimate // -2.3
 */
export function elasticityAt(
  { stores, price, level }: { stores: readonly LaneStore[]; price: number; level: number },
): Interval | null {
  let units = 0;
  let slopes = 0;
  const parts: PartVariance[] = [];
  for (const { model, term, baseUnits } of membersOf(stores, "price").members) {
    // Of depth, ln(price / regular price), the slope by its own logarithm is no elasticity.
    if (term.columns[0] !== "price") continue;
    const { curve, known } = curveWithKnown(model, term.id, { at: [price], derivative: true });
    if (curve.derivative === undefined || known.derivative === undefined) continue;
    const own = baseUnits * Math.exp(curve.estimate[0]);
    units += own;
    slopes += own * curve.derivative.estimate[0];
    parts.push({ all: (own * curve.derivative.standardError[0]) ** 2, known: (own * known.derivative.standardError[0]) ** 2 });
  }
  if (!(units > 0)) return null;
  const [slope, half] = [slopes / units, (normalQuantile(level) * Math.sqrt(varianceOfSum(parts))) / units];
  return { estimate: slope, lower: slope - half, upper: slope + half };
}
