import type { TermBasis } from "../types";
import { unpenalisedCoordinates } from "./coordinates";
import type { TermCoordinates } from "./coordinates";
import { deviationCoordinates, effectCoordinates } from "./group-coordinates";
import { naturalCoordinates } from "./natural-coordinates";
import { pathCoordinates } from "./path-penalty";
import { levelledCoordinates, scaledCoordinates, splineCoordinates } from "./spline-coordinates";
import { tensorCoordinates } from "./tensor-coordinates";

export type { PenaltyShape, TermCoordinates, TermTransform } from "./coordinates";

/**
 * The coordinates a term is fitted in, by its kind. A local regression has none: it is no combination of fixed columns.
 *
 * @example termCoordinates(model.terms[0].basis).penalised; // 8 for a smooth of size 10
 */
export function termCoordinates(basis: TermBasis): TermCoordinates {
  switch (basis.kind) {
    case "linear": return unpenalisedCoordinates({ form: "scaled", factor: 1 / basis.scale }, 1, 1);
    case "factor": {
      const width = basis.levels.length;
      return unpenalisedCoordinates({ form: "without", leftOut: basis.levels.indexOf(basis.reference) }, width, width - 1);
    }
    case "smooth": return splineCoordinates(basis.size, false);
    case "cyclic-smooth": return splineCoordinates(basis.size, true);
    case "scaled-smooth": return scaledCoordinates(basis.size);
    case "levelled-smooth": return levelledCoordinates(basis);
    case "natural-spline": return naturalCoordinates(basis.knots);
    case "local-regression": return unpenalisedCoordinates({ form: "scaled", factor: 1 }, basis.at.length, 0);
    case "tensor-product": return tensorCoordinates(basis);
    case "random-walk": return pathCoordinates(basis.last - basis.first + 1);
    case "random-effect": return effectCoordinates(basis);
    case "factor-smooth": return deviationCoordinates(basis);
  }
}
