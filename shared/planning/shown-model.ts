import { bandModel, parseModel } from "../engine";
import type { FittedModel, ModelBand } from "../engine";

/** The band of every interval that a person sees: of curves, differences, elasticities, lift and units. */
export const SHOWN_BAND = "averaged" satisfies ModelBand;

/**
 * A fitted model with the covariance that intervals are shown with: it allows for how smooth each curve is having been
 * estimated, not known. Everything made of the model has that band; estimates and tests stay as they are.
 *
 * @returns the model itself where it has that band already, or cannot have it (`band` of the model says so).
 * Cost: about a millisecond for a store's model, nothing for one that has it.
 * @example const model = shownModel(fitModel(spec, data)); // before it is kept
 */
export const shownModel = (model: FittedModel): FittedModel => bandModel(model, SHOWN_BAND);

/**
 * The model of a fit's text, with the band that intervals are shown with, also where it was kept before fits had it.
 *
 * @throws EngineError model-text-invalid for text that is no model.
 * @example readFit(fit).band; // "averaged"
 */
export const readFit = (fit: string): FittedModel => shownModel(parseModel(fit));

/** The band that intervals have after all: "pointwise" where a model could not have the one they are shown with. */
export type ShownBand = typeof SHOWN_BAND | "pointwise";

/**
 * The band that intervals of several models together have.
 *
 * @example bandOf([model]) // "averaged"
 */
export const bandOf = (models: readonly FittedModel[]): ShownBand =>
  models.every(({ band }) => band === SHOWN_BAND) ? SHOWN_BAND : "pointwise";
