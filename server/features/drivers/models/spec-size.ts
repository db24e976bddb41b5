import type { ModelSpec, TermSpec } from "@shared/engine";
import { unusable } from "../../../errors";

/** A fit of a store's weeks with this many coefficients takes well under a second; the work grows with their cube. */
const mostCoefficients = 240;

/** What the engine takes where a term gives no size; a level per week of three years, or per store of a chain. */
const usualSize = { smooth: 10, "cyclic-smooth": 12, "factor-smooth": 6, "random-walk": 156, "random-effect": 1 } as const;
const usualMargin = 5;

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
  switch (term.kind) {
    case "smooth":
    case "cyclic-smooth":
    case "factor-smooth": return term.size ?? usualSize[term.kind];
    case "natural-spline": return term.df;
    case "tensor-product": return (term.sizes?.[0] ?? usualMargin) * (term.sizes?.[1] ?? usualMargin);
    case "random-walk":
    case "random-effect": return usualSize[term.kind];
    case "linear":
    case "factor":
    case "local-regression": return 1;
  }
}
