import { termId } from "../basis/term-basis";
import { EngineError } from "../errors";
import type { ModelSpec, TermSpec } from "../types";

const kinds: readonly string[] = ["linear", "factor", "smooth", "cyclic-smooth"] satisfies TermSpec["kind"][];
/** Names of contributions that are no term's. */
const reserved = ["intercept", "offset"];

/**
 * Checks a specification by itself, without data: it may come from outside as JSON.
 *
 * @throws EngineError spec-invalid, smoothness-out-of-range; the message names the value and the rule.
 * @example checkSpec({ response: "units", family: "gaussian", terms: [] });
 */
export function checkSpec(spec: ModelSpec): void {
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
}

function requireName(value: unknown, role: string): void {
  if (typeof value === "string" && value !== "") return;
  throw new EngineError("spec-invalid", `${role} is ${JSON.stringify(value) ?? "missing"}; it must be a column name.`);
}

function checkTerm(term: TermSpec): void {
  if (typeof term !== "object" || term === null || !kinds.includes(term.kind)) {
    const kind = JSON.stringify((term as { kind?: unknown } | null)?.kind) ?? "missing";
    throw new EngineError("spec-invalid", `Term kind ${kind} is not one of ${kinds.join(", ")}.`);
  }
  requireName(term.column, `column of a ${term.kind} term`);
  if (term.id !== undefined) requireName(term.id, `id of a ${term.kind} term`);
  if ("smoothness" in term) checkSmoothness(term);
}

function checkSmoothness(term: Extract<TermSpec, { smoothness?: unknown }>): void {
  const { smoothness } = term;
  const id = termId(term);
  if (smoothness === undefined || smoothness === "auto") return;
  if (typeof smoothness === "object" && smoothness !== null && "penalty" in smoothness) {
    if (Number.isFinite(smoothness.penalty) && smoothness.penalty >= 1e-12 && smoothness.penalty <= 1e15) return;
    throw new EngineError("smoothness-out-of-range", `Term "${id}": penalty is ${smoothness.penalty}; it must be from 1e-12 to 1e15.`);
  }
  if (typeof smoothness === "object" && smoothness !== null && "df" in smoothness) {
    const lowest = term.kind === "smooth" ? 1 : 0;
    const highest = (term.size ?? (term.kind === "smooth" ? 10 : 12)) - 1;
    if (smoothness.df > lowest && smoothness.df < highest) return;
    throw new EngineError(
      "smoothness-out-of-range",
      `Term "${id}": df is ${smoothness.df}; it must be above ${lowest} and below ${highest} (size - 1).`,
    );
  }
  throw new EngineError("spec-invalid", `Term "${id}": smoothness is ${JSON.stringify(smoothness)}; it must be "auto", { df } or { penalty }.`);
}
