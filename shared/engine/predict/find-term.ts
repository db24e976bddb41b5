import { quoted } from "../basis/columns";
import { EngineError } from "../errors";
import type { FittedModel, FittedTerm } from "../types";

/**
 * A model's term by its id.
 *
 * @throws EngineError term-unknown, naming those it has.
 * @example findTerm(model, "price").edf;
 */
export function findTerm(model: FittedModel, termId: string): FittedTerm {
  const term = model.terms.find((candidate) => candidate.id === termId);
  if (term !== undefined) return term;
  throw new EngineError("term-unknown", `The model has no term "${termId}"; it has ${quoted(model.terms.map(({ id }) => id)) || "none"}.`);
}
