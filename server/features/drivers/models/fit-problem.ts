import { EngineError } from "@shared/engine";
import { PlanningError } from "@shared/planning";
import { ProblemError, unusable } from "../../../errors";

/** What the weeks or the specification did wrong, in a sentence; undefined where the error is none of theirs. */
export function reasonOf(error: unknown): string | undefined {
  const isTheirs = error instanceof EngineError || error instanceof PlanningError || error instanceof ProblemError;
  return isTheirs ? error.message : undefined;
}

/** Turns what engine and planning refuse into problem details with their own code and message; else the error itself. */
export function asProblem(error: unknown): unknown {
  if (error instanceof EngineError || error instanceof PlanningError) return unusable(error.code, error.message);
  return error;
}
