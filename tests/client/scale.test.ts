import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { curveValueAt } from "@/components/charts/scale/curve-height";
import { monthTicks } from "@/components/charts/scale/month-ticks";
import { nearestCurve } from "@/components/charts/scale/nearest-curve";
import { labelsThatFit, labelWidth, wrapLabel } from "@/components/charts/scale/place-labels";
import { ratioDomain } from "@/components/charts/scale/ratio-domain";
import { ratioTicks } from "@/components/charts/scale/ratio-ticks";
import { roundStep, roundTicks } from "@/components/charts/scale/round-ticks";
import { linearScale, logScale } from "@/components/charts/scale/scale";
import { snap, valueAfterKey } from "@/components/charts/scale/snap";
import { unseenRanges } from "@/components/charts/scale/unseen-ranges";

const finite = (min: number, max: number) => fc.double({ min, max, noNaN: true });

describe("scales", () => {
  it("map the ends of a domain to the ends of the range", () => {
    const scale = linearScale({ domain: [1.19, 1.99], range: [0, 800] });
    expect([scale.toPixel(1.19), scale.toPixel(1.99)]).toEqual([0, 800]);
  });

  it("give back the value a pixel came from, linear and log", () => {
    fc.assert(
      fc.property(finite(0.1, 50), finite(0.5, 100), finite(0, 1), (low, width, share) => {
        const value = low + share * width;
        for (const make of [linearScale, logScale]) {
          const scale = make({ domain: [low, low + width], range: [200, 0] });
          expect(scale.toValue(scale.toPixel(value))).toBeCloseTo(value, 8);
        }
      }),
    );
  });

  it("put twice and half equally far from one on a log scale", () => {
    const scale = logScale({ domain: [0.25, 4], range: [100, 0] });
    expect(scale.toPixel(1)).toBeCloseTo(50, 10);
    expect(scale.toPixel(0.5) - 50).toBeCloseTo(50 - scale.toPixel(2), 10);
  });

  it("refuse a log domain that reaches zero", () => {
    expect(() => logScale({ domain: [0, 2], range: [0, 1] })).toThrow(
      "A log scale needs a domain above zero; got 0 to 2.",
    );
  });

  it("put a domain without width in the middle", () => {
    expect(linearScale({ domain: [3, 3], range: [0, 80] }).toPixel(3)).toBe(40);
  });
});

describe("ticks", () => {
  it("stand at prices people name", () => {
    expect(roundTicks(1.19, 1.99, 5)).toEqual([1.2, 1.4, 1.6, 1.8]);
  });

  it("pass through zero as a clean zero", () => {
    expect(roundTicks(-5, 33, 5)).toEqual([0, 10, 20, 30]);
    expect(roundTicks(-0.3, 0.3, 7)).toEqual([-0.3, -0.2, -0.1, 0, 0.1, 0.2, 0.3]);
  });

  it("are never more than asked for, lie within the ends and are multiples of a round step", () => {
    fc.assert(
      fc.property(finite(-1e4, 1e4), finite(1e-2, 1e5), fc.integer({ min: 2, max: 9 }), (low, width, count) => {
        const high = low + width;
        const step = roundStep(low, high, count);
        const leading = step / 10 ** Math.floor(Math.log10(step) + 1e-9);
        expect([1, 2, 2.5, 5].some((round) => Math.abs(leading - round) < 1e-6)).toBe(true);
        const ticks = roundTicks(low, high, count);
        expect(ticks.length).toBeLessThanOrEqual(count);
        for (const tick of ticks) {
          expect(tick).toBeGreaterThanOrEqual(low - step * 1e-6);
          expect(tick).toBeLessThanOrEqual(high + step * 1e-6);
          expect(Math.abs(tick / step - Math.round(tick / step))).toBeLessThan(1e-6);
        }
      }),
    );
  });

  it("of multipliers hold one and round ratios", () => {
    expect(ratioTicks(0.4, 2.3, 4)).toEqual([0.5, 1, 2]);
    expect(ratioTicks(0.05, 20, 4)).toEqual([0.1, 1, 10]);
  });

  it("of multipliers near one fall back to equal steps", () => {
    expect(ratioTicks(0.93, 1.22, 4)).toEqual([1, 1.1, 1.2]);
  });

  it("of the year stand on first days of months", () => {
    expect(monthTicks(3).map(({ label }) => label)).toEqual(["Jan", "Apr", "Jul", "Oct"]);
    expect(monthTicks(3)[2].value).toBeCloseTo(181 / 365, 12);
  });

  it("lose labels that would run into the one before, never their places", () => {
    const scale = linearScale({ domain: [0, 10], range: [0, 100] });
    const ticks = [0, 1, 2, 5, 10].map((value) => ({ value, label: "wide" }));
    const kept = labelsThatFit(ticks, scale);
    expect(kept.map(({ value }) => value)).toEqual([0, 5, 10]);
    kept.slice(1).forEach((tick, index) => {
      const apart = scale.toPixel(tick.value) - scale.toPixel(kept[index].value);
      expect(apart).toBeGreaterThanOrEqual(labelWidth("wide"));
    });
  });

  it("of levels wrap to two lines and end in an ellipsis where even that is too long", () => {
    expect(wrapLabel("Autumn holidays", 70)).toEqual(["Autumn", "holidays"]);
    expect(wrapLabel("None", 70)).toEqual(["None"]);
    expect(wrapLabel("Midsummernight", 50)).toEqual(["Midsu…"]);
  });
});

describe("a slider's steps", () => {
  const prices = { min: 1.19, max: 1.99, step: 0.01 };

  it("land on whole steps without the dust of floating point", () => {
    expect(snap(1.4899999, prices)).toBe(1.49);
    expect(snap(0, prices)).toBe(1.19);
    expect(snap(7, prices)).toBe(1.99);
  });

  it("reach both ends even where the step does not", () => {
    const uneven = { min: 1.193, max: 1.987, step: 0.05 };
    expect(snap(1.19, uneven)).toBe(1.193);
    expect(snap(1.9871, uneven)).toBe(1.987);
  });

  it("follow the keys people expect", () => {
    expect(valueAfterKey("ArrowRight", 1.49, prices)).toBe(1.5);
    expect(valueAfterKey("ArrowDown", 1.49, prices)).toBe(1.48);
    expect(valueAfterKey("PageUp", 1.49, prices)).toBe(1.59);
    expect(valueAfterKey("PageDown", 1.25, prices)).toBe(1.19);
    expect(valueAfterKey("Home", 1.49, prices)).toBe(1.19);
    expect(valueAfterKey("End", 1.49, prices)).toBe(1.99);
    expect(valueAfterKey("a", 1.49, prices)).toBeUndefined();
  });
});

describe("a curve as drawn", () => {
  const points = [
    { x: 1, estimate: 2, lower: 1.5, upper: 3 },
    { x: 2, estimate: 1, lower: 0.8, upper: 1.25 },
    { x: 4, estimate: 0.5, lower: 0.3, upper: 0.8 },
  ];

  it("is straight between its points on the log scale, so a dot lies on the line", () => {
    const y = logScale({ domain: [0.25, 4], range: [200, 0] });
    const left = y.toPixel(2);
    const right = y.toPixel(1);
    expect(y.toPixel(curveValueAt(points, 1.25).estimate)).toBeCloseTo(left + 0.25 * (right - left), 10);
  });

  it("holds its end values beyond its ends", () => {
    expect(curveValueAt(points, 0).estimate).toBe(2);
    expect(curveValueAt(points, 9)).toEqual({ x: 9, estimate: 0.5, lower: 0.3, upper: 0.8 });
  });

  it("is found under a pointer by its height there, within reach only", () => {
    const x = linearScale({ domain: [1, 4], range: [0, 300] });
    const y = logScale({ domain: [0.25, 4], range: [200, 0] });
    const curves = [
      { id: "low", points },
      { id: "flat", points: points.map((point) => ({ ...point, estimate: 3 })) },
    ];
    const at = (value: number) => ({ x: x.toPixel(2), y: y.toPixel(value) });
    expect(nearestCurve(curves, at(1.05), { x, y })).toBe("low");
    expect(nearestCurve(curves, at(2.9), { x, y })).toBe("flat");
    expect(nearestCurve(curves, at(0.3), { x, y })).toBeUndefined();
  });
});

describe("what was not seen", () => {
  it("is hatched where fewer than five weeks lie near a value", () => {
    expect(unseenRanges([1, 2, 3, 4, 5], [0, 4, 5, 9, 2])).toEqual([
      [1, 2.5],
      [4.5, 5],
    ]);
  });

  it("is nothing where every value has its weeks, everything where none has", () => {
    expect(unseenRanges([1, 2, 3], [5, 5, 5])).toEqual([]);
    expect(unseenRanges([1, 2, 3], [0, 0, 0])).toEqual([[1, 3]]);
  });
});

describe("the height of a picture of multipliers", () => {
  it("holds one and every estimate", () => {
    const [low, high] = ratioDomain([
      { estimate: 1.6, lower: 1.5, upper: 1.7 },
      { estimate: 2.4, lower: 2.2, upper: 2.6 },
    ]);
    expect(low).toBeLessThan(1);
    expect(high).toBeGreaterThan(2.4);
  });

  it("is not set by a band that runs away", () => {
    const [, high] = ratioDomain([
      { estimate: 1, lower: 0.9, upper: 1.1 },
      { estimate: 1.5, lower: 0.01, upper: 1e6 },
    ]);
    expect(high).toBeLessThan(3);
  });

  it("does not blow up a driver that does nothing", () => {
    const [low, high] = ratioDomain([
      { estimate: 1, lower: 1, upper: 1 },
      { estimate: 1.001, lower: 1.001, upper: 1.001 },
    ]);
    expect(high / low).toBeGreaterThan(1.2);
  });
});
