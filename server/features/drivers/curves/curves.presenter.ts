import type { Curve } from "@shared/contract/drivers";
import type { CurveDerivative } from "@shared/engine";
import type { DriverCurve } from "./model-curves";

/** One driver's curve as the contract has it: plain arrays on the link scale. */
export function presentCurve({ term, driver, curve, seen }: DriverCurve): Curve {
  return {
    term: term.id,
    driver,
    kind: term.kind,
    column: term.columns[0],
    x: Array.isArray(curve.x) ? curve.x : Array.from(curve.x),
    estimate: Array.from(curve.estimate),
    standardError: Array.from(curve.standardError),
    lower: Array.from(curve.lower),
    upper: Array.from(curve.upper),
    observedRange: curve.observedRange,
    supportCount: Array.from(curve.supportCount),
    seen,
    elasticity: curve.derivative ? presentElasticity(curve.derivative) : null,
  };
}

function presentElasticity({ estimate, lower, upper }: CurveDerivative) {
  return { estimate: Array.from(estimate), lower: Array.from(lower), upper: Array.from(upper) };
}
