import { defaultCyclicSize } from "../basis/cyclic-smooth";
import { defaultSmoothSize } from "../basis/smooth";
import { defaultMarginSize } from "../basis/tensor-product";
import { EngineError } from "../errors";
import type { SmoothTerm, TermSpec } from "../types";

const mostDegrees = 10_000;

type PenalisedTerm = Extract<TermSpec, { smoothness?: unknown }>;

/**
 * Checks how smooth a term is asked to be.
 *
 * @throws EngineError spec-invalid, smoothness-out-of-range; the message names the value and the rule.
 * @example checkSmoothness({ kind: "smooth", column: "price", smoothness: { df: 4 } }, "price");
 */
export function checkSmoothness(term: PenalisedTerm, id: string): void {
  const { smoothness } = term;
  if (smoothness === undefined || smoothness === "auto") return;
  if (typeof smoothness === "object" && smoothness !== null && "penalty" in smoothness) {
    if (Number.isFinite(smoothness.penalty) && smoothness.penalty >= 1e-12 && smoothness.penalty <= 1e15) return;
    throw new EngineError("smoothness-out-of-range", `Term "${id}": penalty is ${smoothness.penalty}; it must be from 1e-12 to 1e15.`);
  }
  if (typeof smoothness === "object" && smoothness !== null && "df" in smoothness) {
    checkDegrees(term, smoothness.df, id);
    return;
  }
  throw new EngineError("spec-invalid", `Term "${id}": smoothness is ${JSON.stringify(smoothness)}; it must be "auto", { df } or { penalty }.`);
}

function checkDegrees(term: PenalisedTerm, df: number, id: string): void {
  const range = degreesOf(term);
  if (range === null) {
    throw new EngineError(
      "spec-invalid",
      `Term "${id}": smoothness is ${JSON.stringify({ df })}; a ${term.kind} takes "auto" or { penalty }, since its degrees of freedom depend on the data.`,
    );
  }
  requireWithin(df, range, id);
}

type Degrees = { lowest: number; highest: number; rule: string };

/** Degrees of freedom a term can have: at an infinite penalty, and without one. Null where only the data can tell. */
function degreesOf(term: PenalisedTerm): Degrees | null {
  if (term.kind === "smooth") {
    // The range of one that varies depends on what it varies by: see checkVaryingDegrees.
    const isVarying = term.by !== undefined;
    return { lowest: 1, highest: isVarying ? mostDegrees : (term.size ?? defaultSmoothSize) - 1, rule: isVarying ? "of all its curves" : "size - 1" };
  }
  if (term.kind === "cyclic-smooth") return { lowest: 0, highest: (term.size ?? defaultCyclicSize) - 1, rule: "size - 1" };
  if (term.kind !== "tensor-product") return null;
  const [left, right] = term.sizes ?? [defaultMarginSize, defaultMarginSize];
  return { lowest: 1, highest: (left - 1) * (right - 1), rule: "(size - 1) of one column times (size - 1) of the other" };
}

/**
 * Checks the degrees of freedom asked for a smooth that varies, once its column `by` is known.
 *
 * @param levels how many curves there are, or null for one curve times a column of numbers.
 * @throws EngineError smoothness-out-of-range.
 * @example checkVaryingDegrees({ kind: "smooth", column: "price", by: "brand", smoothness: { df: 30 } }, "price:brand", 11);
 */
export function checkVaryingDegrees(term: SmoothTerm, id: string, levels: number | null): void {
  const { smoothness, size = defaultSmoothSize } = term;
  if (typeof smoothness !== "object" || !("df" in smoothness)) return;
  const range: Degrees = levels === null
    ? { lowest: 2, highest: size, rule: "size; its constant counts" }
    : { lowest: levels, highest: levels * (size - 1), rule: `size - 1 for each of ${levels} curves together` };
  requireWithin(smoothness.df, range, id);
}

function requireWithin(df: number, { lowest, highest, rule }: Degrees, id: string): void {
  if (df > lowest && df < highest) return;
  throw new EngineError("smoothness-out-of-range", `Term "${id}": df is ${df}; it must be above ${lowest} and below ${highest} (${rule}).`);
}
