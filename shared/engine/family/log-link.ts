import { EngineError } from "../errors";
import type { Family } from "../types";
import { exponential } from "./exponential";
import type { Interval, RowUncertainty } from "./family-rules";

/**
 * Interval of a mean under a log link: exp(eta -+ quantile x standard error).
 *
 * @example logLinkInterval({ linearPredictor: 3, standardError: 0.1, quantile: 1.96 }).upper;
 */
export function logLinkInterval(row: Pick<RowUncertainty, "linearPredictor" | "standardError" | "quantile">): Interval {
  const { linearPredictor, standardError, quantile } = row;
  const half = quantile * standardError;
  return { lower: exponential(linearPredictor - half), upper: exponential(linearPredictor + half) };
}

/**
 * Linear predictors to start from: the response's logarithm, a tenth of a unit up so that zero has one.
 *
 * @example logLinkStart({ response: Float64Array.of(0, 12) });
 */
export const logLinkStart = ({ response }: { response: Float64Array }): Float64Array => response.map((value) => Math.log(value + 0.1));

/**
 * Counts, whole or fractional (goods sold by weight), must not be negative.
 *
 * @throws EngineError response-invalid, with row, value and rule.
 * @example checkUnits(Float64Array.of(3, 0, 2), { column: "units", family: "quasi-poisson" });
 */
export function checkUnits(response: Float64Array, { column, family }: { column: string; family: Family }): void {
  for (let row = 0; row < response.length; row++) {
    if (response[row] < 0) {
      throw new EngineError(
        "response-invalid",
        `Response "${column}" must not be negative for ${family}; row ${row + 1} is ${response[row]}.`,
      );
    }
  }
}

/**
 * A logarithm needs something sold somewhere.
 *
 * @throws EngineError as `checkUnits`, and where all are zero.
 * @example checkSomeUnits(Float64Array.of(3, 0, 2), { column: "units", family: "quasi-poisson" });
 */
export function checkSomeUnits(response: Float64Array, of: { column: string; family: Family }): void {
  checkUnits(response, of);
  if (response.length > 0 && response.every((value) => value === 0)) {
    throw new EngineError("response-invalid", `Response "${of.column}" is 0 in every row; ${of.family} needs a value above 0.`);
  }
}
