import type { FitSummary, Model } from "@shared/contract/drivers";

/** The model to show: the one asked for, else the one in use, else the newest that knows a store. */
export const chooseModel = (models: readonly Model[], wanted: string | null): Model | undefined =>
  models.find((model) => model.id === wanted) ??
  models.find((model) => model.state === "in-use") ??
  models.find((model) => model.fits.length > 0);

/** A newer fit than the one in use that waits to be judged. */
export const newerCandidate = (models: readonly Model[], shown: Model): Model | undefined =>
  models.find((model) => model.state === "candidate" && model.fits.length > 0 && model.createdAt > shown.createdAt);

/** The store to show: the one asked for if the model knows it, else its first. */
export const chooseFit = (model: Model, wanted: string | null): FitSummary | undefined =>
  model.fits.find((fit) => fit.store === wanted) ?? model.fits[0];

/** Weeks loaded since the model shown was fitted, less those that a newer fit has learnt from, which has a notice of its own. */
export const weeksNotLearnt = (shown: Model, waiting: Model | undefined): number =>
  Math.min(shown.newerWeeks, waiting?.newerWeeks ?? shown.newerWeeks);
