import { unpenalisedCoordinates } from "../../penalty/coordinates";
import type { LocalRegressionBasis } from "../../types";
import type { Design, DesignTerm, LearntTerm } from "../design";
import { checkDistinctTotal } from "./check-local";

/** A local regression among the joint unknowns: `count` pooled values, one per distinct point, from `first` on. */
export type LocalPart = { id: string; basis: LocalRegressionBasis; part: DesignTerm; first: number; count: number };

/**
 * A model with local regressions, each entering as the indicators D of its distinct points. Joint unknowns: the
 * coordinates of all other terms first (`fixed` of them), then the pooled values of each local regression, that of most
 * points last.
 */
export type PooledDesign = {
  design: Design;
  /** The same terms, the local ones with D for their columns: its cross-products are Z'WZ of Z = [X, D_1, ..., D_L]. */
  pooled: Design;
  locals: LocalPart[];
  fixed: number;
  size: number;
};

/**
 * Lays the joint unknowns out.
 *
 * @throws EngineError spec-invalid where the distinct points are too many.
 * @example pooledDesign(buildDesign(spec.terms, data, 140)).size; // coordinates and distinct points
 */
export function pooledDesign(design: Design): PooledDesign {
  const locals = design.terms.flatMap(localOf).sort((left, right) => left.count - right.count);
  checkDistinctTotal(locals);
  let size = design.size;
  for (const local of locals) {
    local.first = size;
    size += local.count;
  }
  const parts = design.parts.map((part) => {
    const local = locals.find((candidate) => candidate.part === part);
    return local === undefined ? part : indicators(local);
  });
  return { design, pooled: { ...design, parts, size }, locals, fixed: design.size, size };
}

function localOf({ basis, design: part }: LearntTerm): LocalPart[] {
  return basis.kind === "local-regression" ? [{ id: part.id, basis, part, first: 0, count: basis.at.length }] : [];
}

function indicators({ part, first, count }: LocalPart): DesignTerm {
  const transform = { form: "blocks", matrix: Float64Array.of(1), rows: 1, columns: 1, count, unpenalised: 1 } as const;
  return {
    ...part,
    coordinates: unpenalisedCoordinates(transform, count, count),
    positions: Int32Array.from({ length: count }, (_, k) => first + k),
  };
}
