import { describe, expect, it } from "vitest";
import { expectGaussianAgreement, expectIceCreamAgreement, expectQuasiPoissonAgreement } from "../support/agreement";
import { expectCountAgreement, expectShareAgreement } from "../support/agreement-families";
import { groupChecks } from "../support/agreement-groups";
import {
  expectBackfittedLines, expectLocalAgreement, expectLocalTerms, expectNaturalAgreement, expectOrthogonalLines, expectSplineTerms,
} from "../support/agreement-local";
import { expectCriterionAgreement, expectNestedAgreement, expectTestAgreement, testedCases } from "../support/agreement-tests";
import { expectLevelAgreement, expectNumberAgreement, expectSurfaceAgreement } from "../support/agreement-varying";
import { committedReference, freshReference, inferenceReference } from "../support/reference-files";
import type { References } from "../support/reference-files";

/** Numbers may differ in the digits another machine's arithmetic leaves open; texts and shapes may not. */
function expectSame(fresh: unknown, committed: unknown, path: string): void {
  if (typeof fresh === "number" && typeof committed === "number") {
    const difference = Math.abs(fresh - committed);
    if (!(difference <= 1e-6 * Math.max(1e-3, Math.abs(committed)))) throw new Error(`${path}: ${fresh} now, ${committed} committed`);
  } else if (typeof fresh === "object" && fresh !== null && typeof committed === "object" && committed !== null) {
    const [now, before] = [new Map(Object.entries(fresh)), new Map(Object.entries(committed))];
    expect([...now.keys()], path).toEqual([...before.keys()]);
    for (const [key, value] of now) expectSame(value, before.get(key), `${path}.${key}`);
  } else {
    expect(fresh, path).toEqual(committed);
  }
}

/** Each script runs once. */
const made: { [Name in keyof References]?: References[Name] } = {};
function fresh<Name extends keyof References>(name: Name): References[Name] {
  return (made[name] ??= freshReference(name));
}

const names: (keyof References)[] = [
  "additive-models", "linear-models", "splines", "counts-and-shares", "varying-curves", "natural-and-local", "groups", "local-models",
  "tests-of-terms", "bands",
];

describe("The committed references are what R gives now", () => {
  it.each(names)("%s", (name) => expectSame(fresh(name), committedReference(name), name));
  it("those beside the tests of inference", () => expectSame(inferenceReference.fresh(), inferenceReference.committed(), "inference"));
});

describe("The engine agrees with R as it runs now", () => {
  it("on the 11 products of store 2, normal and quasi-Poisson", () => {
    const { series } = fresh("additive-models");
    expect(series).toHaveLength(11);
    for (const one of series) {
      expectGaussianAgreement(one);
      expectQuasiPoissonAgreement(one);
    }
  });

  it("on the ice-cream demand regression", () => expectIceCreamAgreement(fresh("linear-models")));

  it("on counts and shares", () => {
    const { negativeBinomial, binomial } = fresh("counts-and-shares");
    negativeBinomial.forEach(expectCountAgreement);
    binomial.forEach(expectShareAgreement);
  });

  it("on curves per level, times a number and of two columns", () => {
    const reference = fresh("varying-curves");
    expectLevelAgreement(reference);
    expectNumberAgreement(reference);
    reference.surfaces.forEach(expectSurfaceAgreement);
  });

  it("on terms on groups and over time", () => {
    const reference = fresh("groups");
    for (const check of groupChecks) check(reference);
  });

  it("on regression and smoothing splines", () => {
    const { natural } = fresh("natural-and-local");
    natural.fits.forEach((fit) => expectNaturalAgreement(natural, fit));
    const { splines } = fresh("local-models");
    splines.oneTerm.forEach(({ df, terms }) => expectSplineTerms(splines, { x: df }, terms));
  });

  it("on local regressions", () => {
    const { local } = fresh("natural-and-local");
    local.fits.forEach((fit) => expectLocalAgreement(local, fit));
    const models = fresh("local-models");
    models.local.cases.forEach((one) => expectLocalTerms(models.local, one));
    expectOrthogonalLines(models);
    expectBackfittedLines(models);
  });

  it("on tests of terms and information criteria", () => {
    for (const one of testedCases) {
      expectTestAgreement(fresh("tests-of-terms"), one);
      expectCriterionAgreement(fresh("tests-of-terms"), one);
    }
    expectNestedAgreement(fresh("tests-of-terms"));
  });
});
