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
