/** What planning refuses to do, in a word for programs. */
export type PlanningErrorCode =
  | "too-few-weeks"
  | "nothing-sold"
  | "no-log-link"
  | "no-cells"
  | "cell-repeated"
  | "unusable-value"
  | "not-in-plan";

/**
 * The one error that planning functions throw themselves: a code for programs, and a sentence for people that names the value
 * and the rule. Errors of the engine pass through unchanged.
 *
 * @example new PlanningError("no-cells", "A scenario needs at least one store and one week.")
 */
export class PlanningError extends Error {
  readonly code: PlanningErrorCode;

  constructor(code: PlanningErrorCode, message: string) {
    super(message);
    this.name = "PlanningError";
    this.code = code;
  }
}
