import { EngineError } from "../errors";
import type { ReducedSystem } from "./reduced-system";

/** @throws EngineError too-few-rows unless there are more rows than unpenalised coefficients. */
export function checkRowsSuffice(reduced: ReducedSystem): void {
  const { rowCount, unpenalisedKept } = reduced;
  if (rowCount > unpenalisedKept) return;
  throw new EngineError(
    "too-few-rows",
    `${rowCount} rows (of weight above 0) cannot carry ${unpenalisedKept} unpenalised coefficients; at least ${unpenalisedKept + 1} are needed.`,
  );
}
