import { numberColumn, rowCount } from "../basis/columns";
import { columnsOf } from "../basis/term-basis";
import { EngineError } from "../errors";
import { familyRules } from "../family/family";
import type { FamilyRules } from "../family/family-rules";
import { seededRandom } from "../inference/random";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { FittedModel, ModelData } from "../types";
import { designRows } from "./design-rows";
import { extendModel } from "./extend-model";

export type ResidualKind = "deviance" | "pearson" | "quantile" | "response";

export type ResidualOptions = {
  /** Default "deviance". */
  kind?: ResidualKind;
  /** Of the uniform draws of "quantile": a whole number (default 1); the same seed gives the same residuals. */
  seed?: number;
};

const kinds: readonly ResidualKind[] = ["deviance", "pearson", "quantile", "response"];

/**
 * What a model leaves of each row. "response": response - mean. "deviance": signed square root of the row's part of the
 * deviance. "pearson": (response - mean) / sqrt(variance at dispersion 1), weights included; for log-gaussian both are of the
 * logarithm. Neither is divided by the dispersion. "quantile": randomised quantile residuals, standard normal where the model is
 * right: of quasi-Poisson by the negative binomial (Poisson where the dispersion is 1 or less) it predicts new rows by, gamma for
 * fractional units; coefficients are taken as known.
 * Sources: McCullagh & Nelder (1989), section 2.4; Dunn & Smyth (1996), J. Comput. Graph. Statist. 5, 236-244.
 *
 * @param data columns of the response, the terms, offset and weights, n rows: those fitted to or others. Rows of weight 0, which
 * the fit left out, are judged as of weight 1. Not changed.
 * @returns n values.
 * @throws EngineError as `predict`; response-invalid, weights-invalid; option-invalid.
 * Cost: O(n x entries of a row); "quantile" some microseconds a row.
 * @example residuals(model, data, { kind: "quantile", seed: 7 });
 */
export function residuals(model: FittedModel, data: ModelData, options: ResidualOptions = {}): Float64Array {
  const kind = checkKind(options.kind ?? "deviance");
  const random = seededRandom(options.seed ?? 1);
  const rows = judgedRows(model, data);
  const rules = familyRules(model.spec.family);
  const onOwnScale = rules.fitting === "exact" ? rules.transform(rows.response) : rows.response;
  const { dispersion, fractionalResponse: fractional } = model;
  const theta = model.theta ?? 1;
  return rows.response.map((response, row) => {
    const linearPredictor = rows.linearPredictor[row];
    const weight = rows.weights[row];
    switch (kind) {
      case "response": return response - rules.mean(linearPredictor, dispersion);
      case "quantile": return rules.quantileResidual({ response, linearPredictor, weight, dispersion, theta, fractional }, random.uniform());
      default: return Math.sqrt(weight) * unitResidual(rules, kind, { response: onOwnScale[row], linearPredictor, theta });
    }
  });
}

function checkKind(kind: string): ResidualKind {
  const known = kinds.find((candidate) => candidate === kind);
  if (known !== undefined) return known;
  throw new EngineError("option-invalid", `kind is ${JSON.stringify(kind)}; it must be one of ${kinds.map((name) => `"${name}"`).join(", ")}.`);
}

type Unit = { response: number; linearPredictor: number; theta: number };

function unitResidual(rules: FamilyRules, kind: "deviance" | "pearson", { response, linearPredictor, theta }: Unit): number {
  if (rules.fitting === "exact") return response - linearPredictor;
  const mean = rules.mean(linearPredictor, 1);
  if (kind === "pearson") return (response - mean) / Math.sqrt(rules.variance(mean, theta));
  return Math.sign(response - mean) * Math.sqrt(rules.unitDeviance(response, mean, theta));
}

type JudgedRows = { response: Float64Array; linearPredictor: Float64Array; weights: Float64Array };

function judgedRows(model: FittedModel, data: ModelData): JudgedRows {
  const { spec } = model;
  const columns: [string, string][] = [[spec.response, "response"]];
  for (const term of spec.terms) for (const column of columnsOf(term)) columns.push([column, term.kind]);
  if (spec.offset !== undefined) columns.push([spec.offset, "offset"]);
  if (spec.weights !== undefined) columns.push([spec.weights, "weights"]);
  rowCount(data, columns);
  const extended = extendModel(model, data);
  const design = designRows(extended, data);
  const weights = spec.weights === undefined ? new Float64Array(design.count).fill(1) : judgingWeights(data, spec.weights);
  const response = numberColumn(data, spec.response, "response");
  familyRules(spec.family).checkValues(response, spec.response);
  const linearPredictor = design.offset.slice();
  for (const part of design.parts) addRowsTimes(part.rows, extended.coefficients, part.first, linearPredictor);
  return { response, linearPredictor, weights };
}

function judgingWeights(data: ModelData, name: string): Float64Array {
  return numberColumn(data, name, "weights").map((weight, row) => {
    if (weight >= 0) return weight === 0 ? 1 : weight;
    throw new EngineError("weights-invalid", `Column "${name}" (weights) must not be negative; row ${row + 1} is ${weight}.`);
  });
}
