import quantile from "@stdlib/stats-base-dists-normal-quantile";
import { EngineError } from "../errors";

/**
 * Standard normal quantile of (1 + level) / 2: half the width of an interval in standard errors.
 *
 * @throws EngineError option-invalid unless 0 < level < 1.
 * @example normalQuantile(0.95); // 1.959964
 */
export function normalQuantile(level: number): number {
  if (level > 0 && level < 1) return quantile((1 + level) / 2, 0, 1);
  throw new EngineError("option-invalid", `level is ${level}; it must be above 0 and below 1.`);
}
