import { termCoordinates } from "../penalty/term-transform";
import type { FittedModel, FittedTerm, ModelInformation } from "../types";

/** One penalty of the model, as it stands in the coordinates: multiplier x diagonal at `positions`. */
export type PlacedPenalty = {
  termId: string;
  multiplier: number;
  /** Whether the multiplier was estimated (not given, not held to degrees of freedom). */
  isEstimated: boolean;
  /** Positions within each group's block, else among the shared coordinates. */
  isGrouped: boolean;
  positions: Int32Array;
  diagonal: Float64Array;
};

/** Where a term's coordinates stand. */
export type TermPlace = {
  term: FittedTerm;
  isGrouped: boolean;
  /** Among the shared coordinates (or within each group's block where `isGrouped`), dropped ones left out: unpenalised first. */
  positions: number[];
  /** How many of `positions` are under no penalty. */
  unpenalised: number;
  /** Per entry of `positions`, which of the term's own coordinates it is. */
  own: number[];
};

/**
 * Where each term's coordinates stand in `model.information`, in the order of terms.
 *
 * @example termPlaces(model, information).map(({ positions }) => positions.length);
 */
export function termPlaces(model: FittedModel, information: ModelInformation): TermPlace[] {
  const dropped = new Set(information.dropped);
  return model.terms.map((term) => {
    const coordinates = termCoordinates(term.basis);
    const { unpenalisedFirst, penalisedFirst, groupFirst } = term.layout;
    if (groupFirst !== null) {
      const own = range(0, groupWidth(term));
      return { term, isGrouped: true, positions: own.map((k) => groupFirst + k), unpenalised: 0, own };
    }
    const { unpenalised, penalised } = coordinates;
    const all = [
      ...range(0, unpenalised).map((k) => ({ own: k, position: unpenalisedFirst + k })),
      ...range(0, penalised).map((k) => ({ own: unpenalised + k, position: penalisedFirst + k })),
    ].filter(({ position }) => !dropped.has(position));
    return {
      term, isGrouped: false,
      positions: all.map(({ position }) => position),
      unpenalised: all.filter(({ own }) => own < unpenalised).length,
      own: all.map(({ own }) => own),
    };
  });
}

/**
 * Every penalty of the model in the order of `criterionHessian`: terms in order, each term's penalties in its order.
 *
 * @example placedPenalties(model).length ** 2 === information.criterionHessian.length;
 */
export function placedPenalties(model: FittedModel): PlacedPenalty[] {
  return model.terms.flatMap((term, at) => {
    const coordinates = termCoordinates(term.basis);
    const { penalisedFirst, groupFirst } = term.layout;
    const spec = model.spec.terms[at];
    const smoothness = ("smoothness" in spec ? spec.smoothness : undefined) ?? "auto";
    return coordinates.penalties.map(({ start, end, diagonal }, k): PlacedPenalty => {
      const width = end - start;
      // On groups among the shared coordinates the one group's penalty stands once per group.
      const copies = coordinates.grouped && groupFirst === null ? coordinates.penalised / groupWidth(term) : 1;
      const stride = copies > 1 ? groupWidth(term) : 0;
      const first = (groupFirst ?? penalisedFirst) + start;
      const positions = range(0, copies).flatMap((copy) => range(0, width).map((i) => first + copy * stride + i));
      const once = diagonal ?? new Float64Array(width).fill(1);
      return {
        termId: term.id, multiplier: term.penalties[k], isEstimated: smoothness === "auto", isGrouped: groupFirst !== null,
        positions: Int32Array.from(positions),
        diagonal: Float64Array.from(positions, (_position, i) => once[i % width]),
      };
    });
  });
}

/** Coordinates of one group of a term on groups. */
function groupWidth(term: FittedTerm): number {
  const { transform } = termCoordinates(term.basis);
  return transform.form === "blocks" ? transform.columns : 1;
}

const range = (from: number, to: number): number[] => Array.from({ length: to - from }, (_, k) => from + k);
