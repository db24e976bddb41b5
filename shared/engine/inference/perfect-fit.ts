import type { FittedModel } from "../types";

/**
 * Whether the model reproduces the response exactly: what is left is rounding, and no scale to judge anything by.
 *
 * @example isPerfectFit(model); // false for data with noise
 */
export const isPerfectFit = ({ dispersion, warnings }: FittedModel): boolean =>
  !(dispersion > 0) || warnings.some(({ code }) => code === "perfect-fit");
