import type { BandKind, FittedModel, FittedTerm, ModelData, TermBasis } from "../types";
import { bandModel } from "./band-model";
import { curveData } from "./curve-data";
import { extendModel } from "./extend-model";
import { findTerm } from "./find-term";

/** One curve of a term, ready to be drawn. */
export type DrawnCurve = {
  /** Of the band asked for, carried on to weeks and groups among the values. */
  model: FittedModel;
  /** The term in that model. */
  term: FittedTerm;
  /** Of the one curve, and the rows it is evaluated at. */
  basis: TermBasis;
  data: ModelData;
};

/**
 * The model, basis and rows that one curve of a term is drawn with.
 *
 * @throws EngineError as `curveData`, `bandModel` and `extendModel`.
 * @example drawnCurve(model, term, { x: Float64Array.of(1.49) }).data; // { price: [1.49] }
 */
export function drawnCurve(
  model: FittedModel, term: FittedTerm, at: { x: Float64Array | string[]; group?: string; band?: BandKind },
): DrawnCurve {
  const { x, group, band } = at;
  const { basis, data } = curveData(model, term, { x, group });
  const extended = extendModel(bandModel(model, band), data);
  const found = findTerm(extended, term.id);
  return { model: extended, term: found, basis: found === term ? basis : withNewLevels(basis, found.basis), data };
}

/** The basis drawn, with the groups or weeks the model was extended by. */
function withNewLevels(drawn: TermBasis, extended: TermBasis): TermBasis {
  if (drawn.kind === "random-effect" && extended.kind === "random-effect") return { ...extended, by: drawn.by };
  return drawn.kind === extended.kind ? extended : drawn;
}
