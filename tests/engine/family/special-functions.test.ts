import { gammaBelow } from "@shared/engine/family/gamma-below";
import { gammaRatio, gammaRatioCurvature, gammaRatioSlope, logOfRatio } from "@shared/engine/family/gamma-ratio";
import { logExcess, logRatioExcess } from "@shared/engine/family/log-excess";
import { normalRule } from "@shared/engine/family/normal-nodes";
import { describe, expect, it } from "vitest";

/** Shape, x and R 4.2.2's pgamma(x, shape). */
const gammaValues: [number, number, number][] = [
  [0.5, 1e-20, 1.12837916709551e-10], [1e-4, 1e-8, 0.99821723628128], [0.01, 1e-100, 0.100570652850038], [0.5, 0.3, 0.561421973919],
  [1, 1, 0.632120558828558], [3, 8, 0.986246032255997], [24, 30, 0.885354087285726], [24.9, 10, 5.16612477280238e-5],
  [25, 25, 0.526601531443651], [30, 24, 0.132123584671969], [60, 100, 0.999993658496573], [99, 60, 2.50317546777561e-6],
  [170, 160, 0.224571383411888], [1000, 1031.6, 0.841213453261838], [1200, 1165.359, 0.158621056916634],
  [5800, 5876.158, 0.841352482016623], [1e6, 1000500, 0.691550475771497], [1e9, 1e9 + 3e4, 0.828609412598159],
  [1e12, 1e12, 0.50000013298076],
];

describe("The incomplete gamma function", () => {
  it.each(gammaValues)("of shape %d at %d is R's to 13 digits", (shape, x, expected) => {
    expect(Math.abs(gammaBelow(x, shape) - expected)).toBeLessThan(1e-13);
    // Lower tails are held by their digits, too.
    expect(Math.abs(gammaBelow(x, shape) / expected - 1)).toBeLessThan(1e-11);
  });

  it("is nothing at and below zero, and all far out", () => {
    expect(gammaBelow(0, 3)).toBe(0);
    expect(gammaBelow(-1, 3)).toBe(0);
    expect(gammaBelow(1e3, 3)).toBe(1);
    expect(gammaBelow(10, 1e4)).toBe(0);
    expect(gammaBelow(1e6, 1e4)).toBe(1);
  });

  it("never falls as x grows, also where one way of computing it hands over to another", () => {
    for (const shape of [0.3, 24.99, 25, 60, 99.9, 100, 5000]) {
      let before = 0;
      for (let step = 1; step <= 4000; step++) {
        const value = gammaBelow(shape * (step / 1000), shape);
        expect(value).toBeGreaterThanOrEqual(before - 1e-14);
        before = value;
      }
      expect(before).toBeGreaterThan(0.9);
    }
  });

  it("is continuous in the shape across the hand-overs, to its precision", () => {
    for (const shape of [25, 100]) {
      for (const share of [0.2, 0.4, 0.8, 1, 1.2, 1.9, 2.5]) {
        const [below, above] = [gammaBelow(share * shape, shape - 1e-13 * shape), gammaBelow(share * shape, shape)];
        expect(Math.abs(below - above)).toBeLessThan(1e-12);
      }
    }
  });
});

/** Units, theta and the three differences of gamma functions, by R 4.2.2's lgamma, digamma and trigamma. */
const ratioValues: [number, number, number, number, number][] = [
  [3, 0.5, -4.10263532059139, 1.12075651761135, -2.89015873015873],
  [3, 12, -3.11295988221235, 0.00854143037077199, -0.00129697835741791],
  [40, 29.9, -40.4261983773719, 0.00964547961117235, -0.000462690483871616],
  [40, 30.1, -40.4242784887236, 0.00955363832736411, -0.000455746753602606],
];

describe("Differences of gamma functions", () => {
  it.each(ratioValues)("for %d units and theta %d are R's", (units, theta, ratio, slope, curvature) => {
    expect(Math.abs(gammaRatio(units, theta) / ratio - 1)).toBeLessThan(1e-12);
    expect(Math.abs(gammaRatioSlope(units, theta) / slope - 1)).toBeLessThan(1e-11);
    // The curvature only sets Newton's pace: four digits.
    expect(Math.abs(gammaRatioCurvature(units, theta) / curvature - 1)).toBeLessThan(1e-4);
  });

  it("keep their digits for any theta: the slope is y / (2 theta (y + theta)) to first order", () => {
    for (const theta of [1e4, 1e7, 1e10]) {
      expect(Math.abs((gammaRatioSlope(3, theta) * 2 * theta * (3 + theta)) / 3 - 1)).toBeLessThan(1 / theta);
    }
  });

  it("of no units are nothing", () => {
    for (const theta of [0.01, 5, 29, 31, 1e7]) {
      expect(gammaRatio(0, theta)).toBeCloseTo(0, 12);
      expect(gammaRatioSlope(0, theta)).toBe(0);
      expect(gammaRatioCurvature(0, theta)).toBe(0);
    }
  });

  it("have a logarithm of ratios that neither a large nor a small theta spoils", () => {
    expect(logOfRatio(3, 3, 1e7)).toBe(0);
    expect(Math.abs(logOfRatio(3, 1, 1e12) / 2e-12 - 1)).toBeLessThan(1e-10);
    expect(logOfRatio(0, 1e130, 1e-3)).toBeCloseTo(Math.log(1e-3) - Math.log(1e130), 10);
  });
});

describe("The logarithm's excess", () => {
  it("meets its own series where they hand over, and ln(1 + x) - x elsewhere", () => {
    expect(logExcess(1e-9)).toBeCloseTo(-5e-19, 27);
    expect(Math.abs(logExcess(0.02) / logExcess(0.02 + 1e-12) - 1)).toBeLessThan(1e-9);
    expect(logExcess(2)).toBe(Math.log(3) - 2);
    expect(logExcess(-1)).toBe(-Infinity);
  });

  it("of a ratio is right far below the mean, where x / mean - 1 rounds to -1", () => {
    expect(logRatioExcess(1e-200, 2)).toBeCloseTo(Math.log(1e-200) - Math.log(2) + 1, 10);
    expect(logRatioExcess(2, 2)).toBeCloseTo(0, 15);
    expect(logRatioExcess(2.6, 2)).toBeCloseTo(Math.log(1.3) - 0.3, 14);
  });
});

describe("The normal rule", () => {
  it.each([1, 5, 9, 15])("of %d nodes has the moments of the standard normal up to its degree", (count) => {
    const { nodes, weights } = normalRule(count);
    const moment = (power: number) => nodes.reduce((sum, node, k) => sum + weights[k] * node ** power, 0);
    let expected = 1;
    for (let power = 0; power <= 2 * count - 2; power += 2) {
      expect(Math.abs(moment(power) / expected - 1)).toBeLessThan(1e-11);
      expected *= power + 1;
    }
    expect(Array.from(nodes)).toEqual(Array.from(nodes).sort((left, right) => left - right));
  });

  it("is found once and kept", () => {
    expect(normalRule(9)).toBe(normalRule(9));
  });
});
