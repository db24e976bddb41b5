import type { FitSummary, Model } from "@shared/contract/drivers";
import { countOf } from "@/lib/format/number";
import { driverLabel } from "./driver-words";
import { plainWarning } from "./plain-warning";

/** What to distrust in a fit, each as a sentence. */
export const cautionsOf = (model: Model, fit: FitSummary): string[] => [
  ...(fit.converged ? [] : ["The fit did not settle: take its curves as a sketch."]),
  ...(fit.priceLearning.enough
    ? []
    : [
        `Price moved without promotion in ${countOf(fit.priceLearning.weeksMoved, "week")} only, at ` +
          `${countOf(fit.priceLearning.regularPrices, "regular price")}: too little to trust its elasticity.`,
      ]),
  ...fit.straightLines.map(({ driver, reason }) => `${driverLabel(driver)}: ${reason}`),
  ...fit.warnings.map(plainWarning),
  ...(model.notForPlans ? [model.notForPlans] : []),
];
