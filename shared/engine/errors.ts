/** What can be wrong with a specification, data or a request for a curve; stable, for callers that translate. */
export type EngineErrorCode =
  | "spec-invalid"
  | "column-missing"
  | "column-kind"
  | "column-constant"
  | "column-few-values"
  | "length-mismatch"
  | "value-not-finite"
  | "value-not-positive"
  | "value-out-of-range"
  | "response-invalid"
  | "weights-invalid"
  | "level-unknown"
  | "too-few-rows"
  | "smoothness-out-of-range"
  | "term-unknown"
  | "option-invalid"
  | "model-text-invalid";

/**
 * The only error the engine throws for bad input: its message names the value and the rule it breaks.
 *
 * @example
 * try { fitModel(spec, data); } catch (error) { if (error instanceof EngineError) show(error.code, error.message); }
 */
export class EngineError extends Error {
  readonly code: EngineErrorCode;

  constructor(code: EngineErrorCode, message: string) {
    super(message);
    this.name = "EngineError";
    this.code = code;
  }
}
