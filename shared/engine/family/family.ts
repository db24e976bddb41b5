import { EngineError } from "../errors";
import type { Family } from "../types";
import type { FamilyRules } from "./family-rules";
import { binomial } from "./binomial";
import { gaussian } from "./gaussian";
import { logGaussian } from "./log-gaussian";
import { negativeBinomial } from "./negative-binomial";
import { quasiPoisson } from "./quasi-poisson";

const families: Record<Family, FamilyRules> = {
  gaussian,
  "log-gaussian": logGaussian,
  "quasi-poisson": quasiPoisson,
  "negative-binomial": negativeBinomial,
  binomial,
};

/**
 * Rules of a family by its name.
 *
 * @throws EngineError spec-invalid for a name that is none.
 * @example familyRules("gaussian").mean(1, 0); // 1
 */
export function familyRules(family: Family): FamilyRules {
  if (!Object.hasOwn(families, family)) {
    throw new EngineError("spec-invalid", `Family "${String(family)}" is not one of ${Object.keys(families).join(", ")}.`);
  }
  return families[family];
}
