import type { ModelSpec } from "@shared/engine";

/** Columns that run on with time: a line or curve in them foretells whatever it did last. */
const calendarTime = new Set(["weekIndex"]);

/**
 * Why a specification cannot serve plans, in a sentence; null where it can. Plans split units by a logarithmic link, and
 * a line or curve in calendar time would run on into the weeks planned.
 */
export function notForPlans(spec: ModelSpec): string | null {
  if (spec.response !== "units") return `Plans need a model of units; this one is of ${spec.response}.`;
  if (spec.family === "gaussian") return "Plans need a model whose drivers multiply: log-gaussian or quasi-Poisson.";
  const running = spec.terms.find((term) => term.kind !== "factor" && calendarTime.has(term.column));
  if (!running) return null;
  const shape = running.kind === "linear" ? "line" : "curve";
  return `A ${shape} in calendar time (${running.column}) would run on into the weeks planned.`;
}
