import { coefficientNames } from "../basis/term-basis";
import { quoted } from "../basis/columns";
import type { Family, ModelWarning } from "../types";
import type { Design } from "./design";
import type { FittedRows } from "./fitted-rows";
import { isAtLimit } from "./penalty-search";
import type { WorkingFit } from "./working-fit";

type Situation = { design: Design; fit: WorkingFit; rows: FittedRows; family: Family; isPerfect: boolean };

/** What a person should know about a fit before trusting it. */
export function fitWarnings(situation: Situation): ModelWarning[] {
  const { fit, isPerfect } = situation;
  const warnings = [...indistinguishable(situation), ...straightLines(situation), ...emptyLevels(situation)];
  if (isPerfect) {
    warnings.push({ code: "perfect-fit", message: "The model reproduces the response exactly; its bands say nothing about new rows." });
  }
  if (!fit.converged) {
    warnings.push({
      code: "not-converged",
      message: `The fit did not come to rest in ${fit.iterations} iterations; its numbers are the last ones reached.`,
    });
  }
  return warnings;
}

/** Names each dropped column and the ones it cannot be told apart from. */
function indistinguishable({ design, fit }: Situation): ModelWarning[] {
  const names = unpenalisedNames(design);
  return fit.reduced.dropped.map(({ column, dependsOn }) => {
    const own = names[column];
    // A straight line beside its own column differs by a constant, which is no news.
    const others = dependsOn.filter((earlier) => earlier > 0).map((earlier) => names[earlier].name);
    const apart = others.length === 0 ? "from a constant" : `from ${quoted(others)}`;
    return {
      code: "columns-indistinguishable",
      term: own.term,
      message: `"${own.name}" cannot be told apart ${apart} in these rows; it is left out (of such columns the later one in the specification goes).`,
    };
  });
}

function unpenalisedNames(design: Design): { name: string; term: string }[] {
  const names = [{ name: "intercept", term: "intercept" }];
  for (const { design: part, basis } of design.terms) {
    const { unpenalised, transform } = part.coordinates;
    const raw = coefficientNames(basis, part.id);
    const own = transform.form === "without" ? raw.filter((_name, k) => k !== transform.leftOut) : [`${part.id}${transform.form === "dense" ? " (straight line)" : ""}`];
    for (let k = 0; k < unpenalised; k++) names.push({ name: own[k], term: part.id });
  }
  return names;
}

function straightLines({ design, fit }: Situation): ModelWarning[] {
  return design.blocks.flatMap(({ id, smoothness, unpenalised }, block): ModelWarning[] => {
    if (smoothness !== "auto" || !isAtLimit(fit.search, block)) return [];
    const shape = unpenalised > 0 ? "a straight line" : "no effect";
    return [{ code: "straight-line", term: id, message: `Term "${id}": the data show ${shape}; its penalty went to its limit.` }];
  });
}

/** A level that never sold has no finite logarithm: its coefficient runs off, harmlessly, and must not be read. */
function emptyLevels({ design, rows, family }: Situation): ModelWarning[] {
  if (family !== "quasi-poisson") return [];
  return design.terms.flatMap(({ basis, design: part }): ModelWarning[] => {
    if (basis.kind !== "factor" || part.rows.storage !== "index") return [];
    const totals = new Float64Array(basis.levels.length);
    const { index } = part.rows;
    for (let row = 0; row < index.length; row++) totals[index[row]] += rows.response[row];
    return basis.levels.filter((_level, k) => totals[k] === 0).map((level) => ({
      code: "level-without-units",
      term: part.id,
      message: `Level "${level}" of factor "${part.id}" has only zeros: its effect is "none sold", and its coefficient has no meaningful size.`,
    }));
  });
}
