import { mixtureTail, simpleTail, truncatedTest } from "@shared/engine/inference/truncated-test";
import type { FunctionUnderTest } from "@shared/engine/inference/truncated-test";
import { varianceComponentTest } from "@shared/engine/inference/variance-component-test";
import { chiSquareTail, fTail } from "@shared/engine/inference/weighted-chi-square";
import { withoutSpan } from "@shared/engine/inference/without-span";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";

const diagonal = (...values: number[]): Float64Array =>
  Float64Array.from({ length: values.length ** 2 }, (_, at) => (Math.floor(at / values.length) === at % values.length ? values[at % values.length] : 0));

/** With the information I the components are estimate / sqrt(variance), largest variance first. */
const under = (change: Partial<FunctionUnderTest> = {}): FunctionUnderTest => ({
  estimate: Float64Array.of(3, 2, 0.5),
  covariance: diagonal(4, 1, 0.25),
  information: diagonal(1, 1, 1),
  rank: 3,
  residualDegrees: null,
  orientation: Float64Array.of(1, 1, 1),
  ...change,
});

describe("The test of truncated rank", () => {
  it("of whole rank is Wald's: all components, a chi-square", () => {
    const test = truncatedTest(under())!;
    expect(test.statistic).toBeCloseTo(9 / 4 + 4 + 1, 12);
    expect(test.rank).toBe(3);
    expect(test.pValue).toBeCloseTo(chiSquareTail(7.25, 3), 12);
  });

  it("leaves out the components of least variance", () => {
    const test = truncatedTest(under({ rank: 2 }))!;
    expect(test.statistic).toBeCloseTo(9 / 4 + 4, 12);
    expect(test.pValue).toBeCloseTo(chiSquareTail(6.25, 2), 12);
    expect(truncatedTest(under({ rank: 2, residualDegrees: 30 }))!.pValue).toBeCloseTo(fTail(6.25 / 2, 2, 30), 12);
  });

  it("takes a fraction of the next one, with the pair's two weights adding up to it", () => {
    // Wood (2013), section 2: k = 1, v = 0.5: z1^2 + v z2^2 + 2 sqrt(v (1 - v) / 2) z1 z2, z = (1.5, 2).
    const test = truncatedTest(under({ rank: 1.5 }))!;
    const cross = 2 * Math.sqrt(0.125) * 1.5 * 2;
    expect(test.statistic).toBeCloseTo(1.5 ** 2 + 0.5 * 4 + cross, 12);
    expect(test.rank).toBe(1.5);
    // Eigenvalues of [1, p; p, v]: they sum to 1 + v, their product is v - p^2 = v - v (1 - v) / 2.
    const weights = [(1.5 + Math.sqrt(0.75)) / 2, (1.5 - Math.sqrt(0.75)) / 2];
    expect(weights[0] * weights[1]).toBeCloseTo(0.5 - 0.125, 12);
    const tail = (statistic: number) => mixtureTail(statistic, weights, null);
    expect(test.pValue).toBeCloseTo((tail(4.25 + cross) + tail(4.25 - cross)) / 2, 12);
  });

  it("takes one whole component where there is less than one degree of freedom", () => {
    const test = truncatedTest(under({ rank: 0.3 }))!;
    expect(test).toMatchObject({ statistic: 2.25, rank: 1 });
    expect(test.pValue).toBeCloseTo(chiSquareTail(2.25, 1), 12);
  });

  it("asks no more rank than there are coefficients", () => {
    expect(truncatedTest(under({ rank: 7.2 }))!.rank).toBe(3);
  });

  it("passes over directions the rows cannot tell from nothing", () => {
    const test = truncatedTest(under({ information: diagonal(1, 1, 0) }))!;
    expect(test.rank).toBe(2);
    expect(test.statistic).toBeCloseTo(6.25, 12);
  });

  it("has a p-value that orientation does not touch, and does not depend on coordinates", () => {
    const plain = under({ rank: 1.7, residualDegrees: 40 });
    const here = truncatedTest(plain)!;
    const turned = truncatedTest({ ...plain, orientation: Float64Array.of(1, -1, 1) })!;
    expect(turned.statistic).not.toBeCloseTo(here.statistic, 3);
    expect(turned.pValue).toBeCloseTo(here.pValue, 12);
    // b = T c with T = diag(2, -3, 0.1): cov = T^-1 cov T^-1, information = T information T.
    const scales = [2, -3, 0.1];
    const scaled = truncatedTest({
      ...plain,
      estimate: plain.estimate.map((value, k) => value / scales[k]),
      covariance: diagonal(4 / 4, 1 / 9, 0.25 / 0.01),
      information: diagonal(4, 9, 0.01),
      orientation: plain.orientation.map((value, k) => value / scales[k]),
    })!;
    expect(scaled.statistic).toBeCloseTo(here.statistic, 10);
    expect(scaled.pValue).toBeCloseTo(here.pValue, 10);
  });

  it("is null where the covariance is singular", () => {
    expect(truncatedTest(under({ covariance: diagonal(1, 1, 0) }))).toBe(null);
  });

  it("refers an estimated dispersion to F, a known one to chi-square", () => {
    expect(simpleTail(8, 2, null)).toBeCloseTo(Math.exp(-4), 12);
    expect(simpleTail(8, 2, 50)).toBeCloseTo((1 + 8 / 50) ** -25, 12);
    // A dispersion from very many rows is as good as known.
    expect(mixtureTail(5, [1, 1, 0.4], 1e7)).toBeCloseTo(mixtureTail(5, [1, 1, 0.4], null), 6);
  });
});

describe("The test of a variance component", () => {
  const component = (change: Partial<Parameters<typeof varianceComponentTest>[0]> = {}) => varianceComponentTest({
    estimate: Float64Array.of(1, -0.5), covariance: diagonal(0.25, 0.1), penaltyShare: diagonal(0.05, 0.04), dispersion: 1, residualDegrees: null, ...change,
  });

  it("weighs each direction by what the data, not the penalty, say of it", () => {
    // Eigenvalues of I - C^-1 C S C: 1 - 0.05 / 0.25 and 1 - 0.04 / 0.1.
    const test = component()!;
    expect(test.statistic).toBeCloseTo(4 + 2.5, 12);
    expect(test.rank).toBe(2);
    expect(test.pValue).toBeCloseTo(mixtureTail(6.5, [0.8, 0.6], null), 12);
    expect(component({ residualDegrees: 12, dispersion: 2 })!.pValue).toBeCloseTo(mixtureTail(3.25, [0.8, 0.6], 12), 12);
  });

  it("finds its eigenvalues where the two matrices share no axes", () => {
    // C = [2, 1; 1, 2] and S = I: I - C^-1 (C C) has eigenvalues 1 - eigenvalues of C = 1 - 3, 1 - 1; scaled by 0.2: 0.4 and 0.8.
    const test = component({ covariance: Float64Array.of(2, 1, 1, 2), penaltyShare: Float64Array.of(5, 4, 4, 5).map((value) => 0.2 * value), estimate: Float64Array.of(1, 1) })!;
    expect(test.statistic).toBeCloseTo(2 / 3, 12);
    expect(test.pValue).toBeCloseTo(mixtureTail(2 / 3, [0.8, 0.4], null), 10);
  });

  it("is null where nothing is left of it, or its covariance is singular", () => {
    expect(component({ penaltyShare: diagonal(0.25, 0.1) })).toBe(null);
    expect(component({ covariance: diagonal(0.25, 0) })).toBe(null);
  });

  it("rejects a true null as often as it says: one in twenty of 4,000 draws, within four standard errors", () => {
    const normal = seededNormal(8);
    let rejected = 0;
    for (let draw = 0; draw < 4000; draw++) {
      // Under the null b has the covariance C - C S C.
      const estimate = Float64Array.of(Math.sqrt(0.2) * normal(), Math.sqrt(0.06) * normal());
      rejected += component({ estimate })!.pValue < 0.05 ? 1 : 0;
    }
    expect(Math.abs(rejected / 4000 - 0.05)).toBeLessThan(4 * Math.sqrt((0.05 * 0.95) / 4000));
  });
});

describe("Taking the first columns off the later ones", () => {
  it("leaves the sum of squares of what they do not reproduce", () => {
    expect(Array.from(withoutSpan(Float64Array.of(1, 2, 2, 5), 2, 1))).toEqual([1]);
    // Columns (1, 1, 1), (0, 1, 2), (0, 1, 4): x^2 less constant and line on 0, 1, 2 is (1, -2, 1) / 3.
    expect(withoutSpan(Float64Array.of(3, 3, 5, 3, 5, 9, 5, 9, 17), 3, 2)[0]).toBeCloseTo(6 / 9, 12);
  });

  it("passes over a first column that an earlier one reproduces", () => {
    expect(withoutSpan(Float64Array.of(1, 1, 2, 1, 1, 2, 2, 2, 5), 3, 2)[0]).toBeCloseTo(1, 12);
    expect(Array.from(withoutSpan(Float64Array.of(4), 1, 0))).toEqual([4]);
  });
});
