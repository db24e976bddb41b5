import { columnsOf, termId } from "../basis/term-basis";
import type { FittedModel, TermSpec } from "../types";
import { isSame, isWithin, widerTerms } from "./nesting";
import type { WiderTerm } from "./nesting";

const significance = 0.05;

/** What the comparison found. */
export type Finding = { pValue: number | null; degreesOfFreedom: number; isPerfect: boolean };

/**
 * One plain sentence on whether the larger model is worth it, at the 5 % level.
 *
 * @example comparisonVerdict(line, curve, { pValue: 0.002, degreesOfFreedom: 3.1, isPerfect: false });
 * // "A curve instead of a line in "price" is worth it: it explains more than chance would (p = 0.002)."
 */
export function comparisonVerdict(smaller: FittedModel, larger: FittedModel, { pValue, degreesOfFreedom, isPerfect }: Finding): string {
  const care = smaller.converged && larger.converged ? "" : " One of the two fits did not come to rest, so take this with care.";
  if (isPerfect) return `The larger model reproduces the response exactly, so nothing is left to judge it by.${care}`;
  if (pValue === null) {
    return "The two models differ by less than half a degree of freedom "
      + `(${degreesOfFreedom.toFixed(2)}), too little to compare them this way: read the larger model's test of a curve against a line instead.${care}`;
  }
  const what = additions(smaller, larger);
  if (pValue < significance) return `${capitalised(what)} is worth it: it explains more than chance would (${shown(pValue)}).${care}`;
  return `No evidence that ${what} explains more than chance would (${shown(pValue)}): the smaller model will do.${care}`;
}

const shown = (pValue: number): string => (pValue < 0.001 ? "p below 0.001" : `p = ${pValue.toFixed(3)}`);

const capitalised = (text: string): string => text[0].toUpperCase() + text.slice(1);

/** What the larger model has that the smaller has not, in words. */
function additions(smaller: FittedModel, larger: FittedModel): string {
  const wider = widerTerms(larger);
  const parts = wider.flatMap((term): string[] => {
    if (smaller.spec.terms.some((own) => isSame(own, term.spec))) return [];
    const within = smaller.spec.terms.find((own) => isWithin(own, term));
    return [within === undefined ? added(term) : widened(within, term)];
  });
  if (parts.length === 0) return "another choice of smoothness";
  return parts.length === 1 ? parts[0] : `${parts.slice(0, -1).join(", ")} together with ${parts[parts.length - 1]}`;
}

function added({ spec, perLevel }: WiderTerm): string {
  if (perLevel && spec.kind === "smooth") return `a curve of "${spec.column}" for each "${spec.by}"`;
  switch (spec.kind) {
    case "factor-smooth": return `a curve of "${spec.column}" for each "${spec.group}"`;
    case "random-effect": return `a ${spec.by === undefined ? "level" : `slope in "${spec.by}"`} for each "${spec.column}"`;
    case "smooth": case "cyclic-smooth": case "natural-spline": case "local-regression": return `the curve "${termId(spec)}"`;
    case "tensor-product": return `the interaction of ${spec.columns.map((column) => `"${column}"`).join(" and ")}`;
    case "random-walk": return `the moving level "${termId(spec)}"`;
    default: return `"${termId(spec)}"`;
  }
}

function widened(own: TermSpec, { spec, perLevel }: WiderTerm): string {
  const [column] = columnsOf(own);
  if (spec.kind === "factor") return own.kind === "linear" ? `a level for each value of "${column}"` : `a level for each "${column}" without shrinkage`;
  if (spec.kind === "factor-smooth") return `a curve of "${spec.column}" for each "${spec.group}"`;
  if (own.kind === "smooth" && spec.kind === "smooth" && own.shape !== spec.shape) return `a curve of "${column}" of any shape`;
  if (perLevel && spec.kind === "smooth") return `a curve of "${column}" for each "${spec.by}"`;
  return own.kind === "linear" ? `a curve instead of a line in "${column}"` : `a finer curve of "${column}"`;
}
