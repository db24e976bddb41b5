import type { ModelSpec, TermSpec } from "@shared/engine";
import { unusable } from "../../../errors";

/** A fit of a store's weeks with this many coefficients takes well under a second; the work grows with their cube. */
const mostCoefficients = 160;

/** Basis sizes the engine takes where a term gives none. */
const defaultSizes = { smooth: 10, "cyclic-smooth": 12 } as const;

/**
 * Refuses a specification that would keep a process busy for minutes: no store's weeks can tell so many coefficients apart.
 *
 * @throws ProblemError 422.
 */
export function requireModestSpec({ terms }: ModelSpec): void {
  const coefficients = terms.reduce((sum, term) => sum + sizeOf(term), 0);
  if (coefficients <= mostCoefficients) return;
  const detail =
    `The terms have ${coefficients} coefficients: at most ${mostCoefficients} are fitted. ` +
    "Use fewer terms, or a smaller size for their curves.";
  throw unusable("spec-too-large", detail, [{ path: "spec.terms", message: detail }]);
}

function sizeOf(term: TermSpec): number {
  if (term.kind === "smooth" || term.kind === "cyclic-smooth") return term.size ?? defaultSizes[term.kind];
  return 1;
}
