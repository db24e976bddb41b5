import { fitModel } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { expect } from "vitest";
import { edfOf, expectGamAgreement, gaussianTolerances, iterativeTolerances } from "./gam-agreement";
import { largestDifference, standardDeviation } from "./measures";
import type { GroupCurves, Groups } from "./reference-shapes";

const curve = { kind: "smooth", column: "x", size: 8 } as const;

/** One level per store, shrunk: s(store, bs = "re"). */
export function expectLevelsAgreement({ stores: { data, levels } }: Groups): void {
  const model = fitModel({
    response: "y", family: "gaussian",
    terms: [curve, { kind: "linear", column: "depth" }, { kind: "random-effect", column: "store" }],
  }, data);
  expectGamAgreement({ model, data, summary: levels, terms: { x: [0], store: [1] }, within: gaussianTolerances });
  const { first, count } = model.terms[2];
  const own = model.coefficients.slice(first, first + count);
  expect(largestDifference(own, levels.storeLevels) / standardDeviation(levels.storeLevels)).toBeLessThan(gaussianTolerances.fitted);
}

/** A level and a slope per store: s(store, bs = "re") + s(store, by = depth, bs = "re"). */
export function expectSlopesAgreement({ stores: { data, slopes } }: Groups): void {
  const model = fitModel({
    response: "y", family: "gaussian",
    terms: [
      curve, { kind: "linear", column: "depth" },
      { kind: "random-effect", column: "store" }, { kind: "random-effect", id: "slopes", column: "store", by: "depth" },
    ],
  }, data);
  expectGamAgreement({ model, data, summary: slopes, terms: { x: [0], store: [1], slopes: [2] }, within: gaussianTolerances });
}

/** A level that moves from week to week, over weeks without rows too. */
export function expectWalkAgreement({ walk }: Groups): void {
  const model = fitModel({ response: "y", family: "gaussian", terms: [curve, { kind: "random-walk", column: "week" }] }, walk.data);
  expectGamAgreement({ model, data: walk.data, summary: walk.fit, terms: { x: [0] }, within: gaussianTolerances });
  expect(Math.abs(edfOf(model, "week") - walk.walkEdf)).toBeLessThan(gaussianTolerances.edf);
}

/** A deviation curve per store: normal. */
export function expectCurvesAgreement({ curves }: Groups): void {
  const model = fitCurves("gaussian", curves);
  expectGamAgreement({ model, data: curves.data, summary: curves.fit, terms: { x: [0] }, within: gaussianTolerances });
  expect(Math.abs(edfOf(model, "stores") - edfOfParts(curves))).toBeLessThan(gaussianTolerances.edf);
}

/** A deviation curve per store: quasi-Poisson. */
export function expectCurvesOfCountsAgreement({ curvesOfCounts: curves }: Groups): void {
  const model = fitCurves("quasi-poisson", curves);
  expectGamAgreement({ model, data: curves.data, summary: curves.fit, terms: { x: [0] }, within: iterativeTolerances });
  expect(Math.abs(edfOf(model, "stores") - edfOfParts(curves))).toBeLessThan(iterativeTolerances.edf);
}

function fitCurves(family: ModelSpec["family"], { data, size }: GroupCurves): FittedModel {
  return fitModel({
    response: "y", family, terms: [curve, { kind: "factor-smooth", id: "stores", column: "x", group: "store", size }],
  }, data);
}

const edfOfParts = ({ partsEdf: { level, slope, wiggly } }: GroupCurves): number => level + slope + wiggly;

/** Every check of this file. */
export const groupChecks = [
  expectLevelsAgreement, expectSlopesAgreement, expectWalkAgreement, expectCurvesAgreement, expectCurvesOfCountsAgreement,
] as const;
