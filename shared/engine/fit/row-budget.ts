import { quoted } from "../basis/columns";
import { EngineError } from "../errors";
import type { PenalisedSystem } from "./restricted-likelihood";

/** @throws EngineError too-few-rows unless there are more rows than unpenalised coefficients. */
export function checkRowsSuffice(system: PenalisedSystem): void {
  const { rowCount, unpenalisedKept } = system;
  if (rowCount > unpenalisedKept) return;
  throw new EngineError(
    "too-few-rows",
    `${rowCount} rows (of weight above 0) cannot carry ${unpenalisedKept} unpenalised coefficients; at least ${unpenalisedKept + 1} are needed.`,
  );
}

/**
 * Whether the fit ended in a criterion: without one its system stayed singular under any penalty.
 *
 * @param ids of the model's terms.
 * @throws EngineError too-few-rows.
 */
export function checkDetermined(criterion: number, rowCount: number, ids: readonly string[]): void {
  if (Number.isFinite(criterion)) return;
  throw new EngineError(
    "too-few-rows",
    `${rowCount} rows (of weight above 0) leave the terms ${quoted(ids)} undetermined together, whatever their penalties; leave one out or give it fewer degrees of freedom.`,
  );
}
