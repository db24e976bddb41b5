import { coefficientNames } from "../basis/term-basis";
import { quoted } from "../basis/columns";
import type { Family, ModelWarning } from "../types";
import type { Design, LearntTerm } from "./design";
import type { FittedRows } from "./fitted-rows";
import type { WorkingFit } from "./working-fit";

type Situation = { design: Design; fit: WorkingFit; rows: FittedRows; family: Family; fitted: Float64Array; isPerfect: boolean };

/** What a person should know about a fit before trusting it. */
export function fitWarnings(situation: Situation): ModelWarning[] {
  const { fit, isPerfect } = situation;
  const warnings = [...indistinguishable(situation), ...straightLines(situation), ...raisedPenalties(situation), ...emptyLevels(situation), ...separation(situation)];
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
  const { dropped } = fit.solution.system;
  if (dropped.length === 0) return [];
  const names = unpenalisedNames(design);
  return dropped.map(({ column, dependsOn }) => {
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
  for (const term of design.terms) {
    if (term.design.groupFirst !== null) continue;
    const own = ownNames(term);
    for (let k = 0; k < term.design.coordinates.unpenalised; k++) names.push({ name: own[k], term: term.design.id });
  }
  return names;
}

function ownNames({ basis, design: part }: LearntTerm): string[] {
  const { transform } = part.coordinates;
  if (transform.form === "without") return coefficientNames(basis, part.id).filter((_name, k) => k !== transform.leftOut);
  switch (basis.kind) {
    case "smooth": return [`${part.id} (straight line)`];
    case "levelled-smooth": return basis.levels.map((level) => `${part.id} (straight line, ${level})`);
    case "scaled-smooth": return [`${part.id} (level)`, `${part.id} (straight line)`];
    case "tensor-product": return [`${part.id} (product of straight lines)`];
    case "natural-spline": return Array.from({ length: part.coordinates.unpenalised }, (_, k) => `${part.id} (${k + 1})`);
    default: return [part.id];
  }
}

function straightLines({ design, fit }: Situation): ModelWarning[] {
  return design.penalties.flatMap(({ id, smoothness, grouped }, penalty): ModelWarning[] => {
    if (smoothness !== "auto" || !(fit.solution.edf[penalty] < 1e-3)) return [];
    const term = design.terms.find(({ design: part }) => part.id === id);
    if (term === undefined || !isCurve(term) || grouped) return [];
    const shape = term.design.coordinates.unpenalised > 0 ? "a straight line" : "no effect";
    return [{ code: "straight-line", term: id, message: `Term "${id}": the data show ${shape}; its penalty went to its limit.` }];
  });
}

/** A penalty given, too small for rounding, is raised until the system is regular: each term once. */
function raisedPenalties({ design, fit }: Situation): ModelWarning[] {
  const { multipliers } = fit.solution.search.current;
  const raised = new Map<string, ModelWarning>();
  design.penalties.forEach(({ id, smoothness }, penalty) => {
    if (typeof smoothness === "string" || !("penalty" in smoothness) || !(multipliers[penalty] > smoothness.penalty * (1 + 1e-6))) return;
    raised.set(id, {
      code: "penalty-raised", term: id,
      message: `Term "${id}": with penalty ${smoothness.penalty} these rows leave its curve undetermined; it is fitted with ${Number(multipliers[penalty].toPrecision(3))}.`,
    });
  });
  return [...raised.values()];
}

const isCurve = ({ basis }: LearntTerm): boolean => basis.kind === "smooth" || basis.kind === "cyclic-smooth" || basis.kind === "scaled-smooth";

/** A level that never sold has no finite logarithm: its coefficient runs off, harmlessly, and must not be read. */
function emptyLevels({ design, rows, family }: Situation): ModelWarning[] {
  if (family !== "quasi-poisson" && family !== "negative-binomial") return [];
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

/** A probability this near to 0 or 1 is what a coefficient on its way to infinity gives. */
const certain = 1e-8;

function separation({ family, fitted }: Situation): ModelWarning[] {
  if (family !== "binomial") return [];
  let sure = 0;
  for (const share of fitted) if (share < certain || share > 1 - certain) sure++;
  if (sure === 0) return [];
  const rows = sure === 1 ? "1 row has a fitted share" : `${sure} rows have fitted shares`;
  return [{
    code: "separation",
    message: `The terms separate the response: ${rows} of 0 or 1, and some coefficients have no finite value; their size and bands must not be read.`,
  }];
}
