import { termId } from "../basis/term-basis";
import { defaultSmoothSize } from "../basis/smooth";
import type { FittedModel, TermSpec } from "../types";

/**
 * Why a smaller model is not a special case of a larger one on the same rows, as far as specifications and what the fits
 * remember of their rows can tell; null where nothing speaks against it.
 *
 * @example nestingFault(withoutPromotion, withPromotion); // null
 */
export function nestingFault(smaller: FittedModel, larger: FittedModel): string | null {
  for (const name of ["response", "family", "offset", "weights"] as const) {
    const [one, other] = [smaller.spec[name], larger.spec[name]];
    if (one !== other) return `the smaller model's ${name} is ${shown(one)}, the larger's ${shown(other)}; they must be the same`;
  }
  if (smaller.rowCount !== larger.rowCount) {
    return `the smaller model was fitted to ${smaller.rowCount} rows, the larger to ${larger.rowCount}; they must be the same rows`;
  }
  // The null deviance depends on response, weights and offset alone; the negative binomial's on theta as well.
  const apart = Math.abs(smaller.nullDeviance - larger.nullDeviance);
  if (smaller.theta === null && !(apart <= 1e-7 * Math.abs(larger.nullDeviance) + 1e-12)) {
    return "the two models' null deviances differ, so they were fitted to other responses, weights or offsets";
  }
  const wider = widerTerms(larger);
  const outside = smaller.spec.terms.find((term) => !wider.some((one) => isWithin(term, one)));
  return outside === undefined ? null : `term "${termId(outside)}" of the smaller model is not a special case of any term of the larger`;
}

const shown = (value: string | undefined): string => (value === undefined ? "none" : `"${value}"`);

/** A term of the larger model; `perLevel`: its `by` is a column of text, one curve per level. */
export type WiderTerm = { spec: TermSpec; perLevel: boolean };

/** The terms of a fitted model as others may lie within them. */
export const widerTerms = (model: FittedModel): WiderTerm[] =>
  model.spec.terms.map((spec, at) => ({ spec, perLevel: model.terms[at].basis.kind === "levelled-smooth" }));

/** Whether every function the first term can be is one the second can be, penalties aside. */
export function isWithin(term: TermSpec, wider: WiderTerm): boolean {
  if (isSame(term, wider.spec)) return true;
  switch (term.kind) {
    case "linear": return isLineWithin(term, wider);
    case "smooth": return wider.spec.kind === "smooth" && isCurveWithin(term, wider.spec, wider.perLevel);
    case "random-effect": return isEffectWithin(term, wider.spec);
    default: return false;
  }
}

const passedOver = ["id", "smoothness", "reference"];

/** Equal but for name, smoothness and a factor's reference, none of which changes what can be fitted. */
export function isSame(term: TermSpec, wider: TermSpec): boolean {
  const bare = (spec: TermSpec) => {
    const kept = Object.entries(spec).filter(([name, value]) => !passedOver.includes(name) && value !== undefined && value !== false);
    return JSON.stringify(kept.sort(([one], [other]) => (one < other ? -1 : 1)));
  };
  return bare(term) === bare(wider);
}

type Of<Kind extends TermSpec["kind"]> = Extract<TermSpec, { kind: Kind }>;

function isLineWithin(term: Of<"linear">, { spec, perLevel }: WiderTerm): boolean {
  if (!("column" in spec) || spec.column !== term.column) return false;
  if (spec.kind === "factor") return true;
  if (("log" in spec && spec.log === true) !== (term.log === true)) return false;
  if (spec.kind === "smooth") return spec.shape === undefined && (spec.by === undefined || perLevel);
  return spec.kind === "natural-spline" || (spec.kind === "local-regression" && (spec.degree ?? 1) > 0);
}

/** Splines lie within those of another size where the other's knots contain theirs; one curve lies within a curve per level. */
function isCurveWithin(term: Of<"smooth">, spec: Of<"smooth">, perLevel: boolean): boolean {
  if (term.column !== spec.column || (term.log === true) !== (spec.log === true)) return false;
  if (spec.shape !== undefined && spec.shape !== term.shape) return false;
  if (term.by !== spec.by && !(term.by === undefined && perLevel)) return false;
  return ((spec.size ?? defaultSmoothSize) - 3) % ((term.size ?? defaultSmoothSize) - 3) === 0;
}

function isEffectWithin(term: Of<"random-effect">, spec: TermSpec): boolean {
  if (spec.kind === "factor") return term.by === undefined && spec.column === term.column;
  if (spec.kind !== "factor-smooth" || spec.group !== term.column) return false;
  return term.by === undefined || (term.by === spec.column && spec.log !== true);
}
