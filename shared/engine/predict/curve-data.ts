import { quoted } from "../basis/columns";
import { perUnit } from "../basis/per-unit";
import { EngineError } from "../errors";
import type { FittedModel, FittedTerm, ModelData, TermBasis } from "../types";

/** What a term's curve is made of: the basis of one curve, and data with its columns for every term on new weeks or groups. */
export type CurveData = { basis: TermBasis; data: ModelData };

/**
 * The rows that draw one curve of a term: a smooth times a number, and a slope per group, are drawn per unit of that number;
 * of curves per level or group the one named.
 *
 * @throws EngineError option-invalid: no group named where there are several curves, one named where there are none, a
 * tensor product; level-unknown for a level never seen.
 * @example curveData(model, term, { x: Float64Array.of(1.49), group: "42" }).data; // { price: [1.49], store: ["42"] }
 */
export function curveData(
  model: FittedModel, term: FittedTerm, at: { x: Float64Array | string[]; group: string | undefined },
): CurveData {
  const { x, group } = at;
  const { basis } = term;
  const own: ModelData = { [term.columns[0]]: x };
  if (basis.kind === "tensor-product") {
    throw new EngineError("option-invalid", `Term "${term.id}" is a surface over two columns, not a curve; ask for its surface.`);
  }
  if (basis.kind === "levelled-smooth" || basis.kind === "factor-smooth") {
    own[basis.kind === "factor-smooth" ? basis.group : basis.by] = x.length === 0 ? [] : new Array<string>(x.length).fill(groupOf(term.id, basis, group));
    return { basis, data: { ...known(model, x.length), ...own } };
  }
  if (group !== undefined) {
    throw new EngineError("option-invalid", `group is ${JSON.stringify(group)}; term "${term.id}" has one curve only.`);
  }
  return { basis: perUnit(basis), data: { ...known(model, x.length), ...own } };
}

function groupOf(id: string, { levels }: { levels: readonly string[] }, group: string | undefined): string {
  if (group === undefined) {
    throw new EngineError("option-invalid", `Term "${id}" has several curves; name one by group: ${quoted(levels)}.`);
  }
  if (!levels.includes(group)) {
    throw new EngineError("level-unknown", `Term "${id}" has no curve for ${JSON.stringify(group)}; it has ${quoted(levels)}.`);
  }
  return group;
}

/** Values the fit knows for every column that could hold new weeks or groups. */
function known({ terms }: FittedModel, count: number): ModelData {
  const data: ModelData = {};
  for (const { basis } of terms) {
    if (basis.kind === "random-walk") data[basis.column] = new Float64Array(count).fill(basis.last);
    if (basis.kind === "random-effect") data[basis.column] = new Array<string>(count).fill(basis.levels[0]);
    if (basis.kind === "factor-smooth") data[basis.group] = new Array<string>(count).fill(basis.levels[0]);
  }
  return data;
}
