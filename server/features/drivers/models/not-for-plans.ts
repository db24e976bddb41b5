import { columnsOf } from "@shared/engine";
import type { ModelSpec, TermSpec } from "@shared/engine";

/** Columns that run on with time: a line or curve in them foretells whatever it did last. */
const calendarTime = new Set(["weekIndex"]);

/**
 * Why a specification cannot serve plans, in a sentence; null where it can. Plans split units by a logarithmic link, and
 * a line or curve in calendar time would run on into the weeks planned.
 */
export function notForPlans(spec: ModelSpec): string | null {
  if (spec.response !== "units") return `Plans need a model of units; this one is of ${spec.response}.`;
  if (spec.family === "gaussian" || spec.family === "binomial") {
    return "Plans need a model whose drivers multiply: log-gaussian, quasi-Poisson or negative binomial.";
  }
  if (spec.terms.some(({ kind }) => kind === "local-regression")) {
    return "Plans need curves with a formula; a local regression has none beyond the weeks it was fitted to.";
  }
  const running = spec.terms.find((term) => !isHeldLevel(term) && columnsOf(term).some((column) => calendarTime.has(column)));
  if (!running) return null;
  const shape = running.kind === "linear" ? "line" : "curve";
  return `A ${shape} in calendar time (${columnsOf(running).join(", ")}) would run on into the weeks planned.`;
}

/** Kinds that hold still after the last week fitted to. */
const isHeldLevel = ({ kind }: TermSpec): boolean => kind === "factor" || kind === "random-walk" || kind === "random-effect";
