import { quoted } from "../../basis/columns";
import { termId } from "../../basis/term-basis";
import { EngineError } from "../../errors";
import type { TermSpec } from "../../types";

/** Distinct values that the local regressions of one model may have together: the joint system's size is theirs. */
const mostValues = 2000;

/** @example hasLocal([{ kind: "local-regression", column: "price", span: 0.5 }]); // true */
export const hasLocal = (terms: readonly TermSpec[]): boolean => terms.some(({ kind }) => kind === "local-regression");

/**
 * Refuses terms that a model with local regressions cannot have: those on groups, which are solved by elimination, and
 * curves of a given shape.
 *
 * @throws EngineError spec-invalid, naming both terms.
 * @example checkBesideLocal(spec.terms);
 */
export function checkBesideLocal(terms: readonly TermSpec[]): void {
  const local = terms.find(({ kind }) => kind === "local-regression");
  if (local === undefined) return;
  const id = termId(local);
  for (const term of terms) {
    const isGrouped = term.kind === "random-effect" || term.kind === "factor-smooth";
    if (!isGrouped && !(term.kind === "smooth" && term.shape !== undefined)) continue;
    const what = isGrouped ? "is on groups" : "has a shape";
    throw new EngineError(
      "spec-invalid",
      `Term "${termId(term)}" ${what}, which cannot stand beside the local regression "${id}"; use a smooth in place of "${id}".`,
    );
  }
}

/**
 * @param locals id and number of distinct values of each local regression.
 * @throws EngineError spec-invalid where they have more than 2,000 together.
 */
export function checkDistinctTotal(locals: readonly { id: string; count: number }[]): void {
  const total = locals.reduce((sum, { count }) => sum + count, 0);
  if (total <= mostValues) return;
  throw new EngineError(
    "spec-invalid",
    `Local regressions ${quoted(locals.map(({ id }) => id))} have ${total} distinct values together; a model takes up to ${mostValues}. Round their columns, or use a smooth for one.`,
  );
}
