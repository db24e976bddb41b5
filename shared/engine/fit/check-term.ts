import { termId } from "../basis/term-basis";
import { EngineError } from "../errors";
import type { LocalRegressionTerm, NaturalSplineTerm, SmoothTerm, TensorProductTerm, TermSpec } from "../types";
import { checkSmoothness } from "./check-smoothness";

const kinds: readonly TermSpec["kind"][] = [
  "linear", "factor", "smooth", "cyclic-smooth", "natural-spline", "local-regression", "tensor-product", "random-walk",
  "random-effect", "factor-smooth",
];
const largestDegrees = 100;

/**
 * Checks that a value is a column's name.
 *
 * @throws EngineError spec-invalid.
 * @example requireName(spec.response, "response");
 */
export function requireName(value: unknown, role: string): void {
  if (typeof value === "string" && value !== "") return;
  throw new EngineError("spec-invalid", `${role} is ${JSON.stringify(value) ?? "missing"}; it must be a column name.`);
}

/**
 * Checks a term by itself, without data and without the other terms.
 *
 * @throws EngineError spec-invalid, smoothness-out-of-range; the message names the value and the rule.
 * @example checkTerm({ kind: "natural-spline", column: "price", df: 4 });
 */
export function checkTerm(term: TermSpec): void {
  if (typeof term !== "object" || term === null || !kinds.includes(term.kind)) {
    const kind = JSON.stringify((term as { kind?: unknown } | null)?.kind) ?? "missing";
    throw new EngineError("spec-invalid", `Term kind ${kind} is not one of ${kinds.join(", ")}.`);
  }
  if (term.kind === "tensor-product") checkColumns(term);
  else requireName(term.column, `column of a ${term.kind} term`);
  if ("by" in term && term.by !== undefined) requireName(term.by, `by of a ${term.kind} term`);
  if (term.kind === "factor-smooth") requireName(term.group, "group of a factor-smooth term");
  if (term.id !== undefined) requireName(term.id, `id of a ${term.kind} term`);
  const id = termId(term);
  if (term.kind === "smooth") checkShape(term, id);
  if (term.kind === "natural-spline") checkNaturalSpline(term, id);
  if (term.kind === "local-regression") checkLocalRegression(term, id);
  if ("smoothness" in term) checkSmoothness(term, id);
}

function checkColumns(term: TensorProductTerm): void {
  const { columns, sizes } = term;
  if (!Array.isArray(columns) || columns.length !== 2) {
    throw new EngineError("spec-invalid", `columns of a tensor-product term is ${JSON.stringify(columns) ?? "missing"}; it must be two column names.`);
  }
  for (const column of columns) requireName(column, "a column of a tensor-product term");
  if (columns[0] === columns[1]) {
    throw new EngineError("spec-invalid", `A tensor-product term has column "${columns[0]}" twice; its two columns must differ.`);
  }
  if (sizes !== undefined && (!Array.isArray(sizes) || sizes.length !== 2)) {
    throw new EngineError("spec-invalid", `Term "${termId(term)}": sizes is ${JSON.stringify(sizes)}; it must be two whole numbers.`);
  }
}

function checkShape({ shape }: SmoothTerm, id: string): void {
  if (shape === undefined || shape === "decreasing" || shape === "increasing") return;
  throw new EngineError("spec-invalid", `Term "${id}": shape is ${JSON.stringify(shape)}; it must be "decreasing" or "increasing".`);
}

function checkNaturalSpline({ df }: NaturalSplineTerm, id: string): void {
  if (Number.isInteger(df) && df >= 1 && df <= largestDegrees) return;
  throw new EngineError(
    "spec-invalid", `Term "${id}": df is ${JSON.stringify(df) ?? "missing"}; it must be a whole number from 1 to ${largestDegrees}.`,
  );
}

function checkLocalRegression({ span, degree }: LocalRegressionTerm, id: string): void {
  if (typeof span !== "number" || !(span > 0 && span <= 1)) {
    throw new EngineError("spec-invalid", `Term "${id}": span is ${JSON.stringify(span) ?? "missing"}; it must be above 0 and at most 1.`);
  }
  if (degree === undefined || degree === 0 || degree === 1 || degree === 2) return;
  throw new EngineError("spec-invalid", `Term "${id}": degree is ${JSON.stringify(degree)}; it must be 0, 1 or 2.`);
}
