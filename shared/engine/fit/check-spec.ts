import { termId } from "../basis/term-basis";
import { EngineError } from "../errors";
import type { FactorSmoothTerm, ModelData, ModelSpec, RandomEffectTerm, SmoothTerm } from "../types";
import { checkVaryingDegrees } from "./check-smoothness";
import { checkTerm, requireName } from "./check-term";

/** Names of contributions that are no term's. */
const reserved = ["intercept", "offset"];

/**
 * Checks a specification: it may come from outside as JSON. Every term by itself, then what terms need of one another.
 *
 * @param data where given, also checks what depends on a column holding text or numbers.
 * @throws EngineError spec-invalid, smoothness-out-of-range; the message names the value and the rule.
 * @example checkSpec({ response: "units", family: "gaussian", terms: [] });
 */
export function checkSpec(spec: ModelSpec, data?: ModelData): void {
  requireName(spec.response, "response");
  if (spec.offset !== undefined) requireName(spec.offset, "offset");
  if (spec.weights !== undefined) requireName(spec.weights, "weights");
  if (!Array.isArray(spec.terms)) throw new EngineError("spec-invalid", "terms must be a list of terms.");
  const seen = new Set<string>();
  for (const term of spec.terms) {
    checkTerm(term);
    const id = termId(term);
    if (reserved.includes(id)) throw new EngineError("spec-invalid", `Term id "${id}" is reserved; give the term another id.`);
    if (seen.has(id)) throw new EngineError("spec-invalid", `Two terms have the id "${id}"; give one of them another id.`);
    seen.add(id);
  }
  for (const term of spec.terms) {
    if (term.kind === "factor-smooth") checkDeviation(term, spec);
    if (term.kind === "smooth" && term.by !== undefined && data !== undefined) checkVarying(term, term.by, { spec, data });
  }
}

/** Curves per group are deviations from the chain's curve, and hold the groups' levels. */
function checkDeviation(term: FactorSmoothTerm, { terms }: ModelSpec): void {
  const id = termId(term);
  const isLog = term.log === true;
  const hasOwnCurve = terms.some((other) =>
    other.kind === "smooth" && other.by === undefined && other.column === term.column && (other.log === true) === isLog);
  if (!hasOwnCurve) {
    throw new EngineError(
      "spec-invalid",
      `Term "${id}" is curves per "${term.group}" around a common one; the terms must have a smooth of "${term.column}"${isLog ? " (log)" : ""} too.`,
    );
  }
  const level = terms.find((other): other is RandomEffectTerm =>
    other.kind === "random-effect" && other.by === undefined && other.column === term.group);
  if (level !== undefined) {
    throw new EngineError("spec-invalid", `Term "${termId(level)}" is a level per "${term.group}", which the curves of "${id}" have already; leave it out.`);
  }
}

/** A curve per level leaves the levels themselves to a factor; a curve times a number is neither rising nor falling. */
function checkVarying(term: SmoothTerm, by: string, { spec, data }: { spec: ModelSpec; data: ModelData }): void {
  const id = termId(term);
  const isText = Object.hasOwn(data, by) && typeof data[by][0] === "string";
  if (isText && !spec.terms.some((other) => other.kind === "factor" && other.column === by)) {
    throw new EngineError("spec-invalid", `Term "${id}" is a curve per level of "${by}", each centred; the terms must have the factor "${by}" too.`);
  }
  if (!isText && term.shape !== undefined) {
    throw new EngineError("spec-invalid", `Term "${id}": shape is "${term.shape}"; a curve times the numbers of "${by}" cannot have one.`);
  }
  // Counting levels takes a while, and only degrees of freedom asked for depend on it.
  if (typeof term.smoothness === "object") checkVaryingDegrees(term, id, isText ? new Set(Array.from<string | number>(data[by])).size : null);
}
