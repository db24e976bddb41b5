import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { breakEvenOfCell, breakEvenOfPlan, netGain, netOfTax, planMargins, roundToCents } from "@shared/planning";
import type { MoneyCell } from "@shared/planning";

const aCell: MoneyCell = {
  baseUnits: 100, planUnits: 120, regularPrice: 1, price: 0.95, unitCost: 0.55, taxRate: 0, fundingPerUnit: 0,
};

const liftOf = (breakEven: ReturnType<typeof breakEvenOfCell>) => (breakEven.kind === "lift" ? breakEven.lift : Number.NaN);

describe("break-even", () => {
  it("of a 5 % cut at 45 % margin is a lift of 12.5 %", () => {
    expect(breakEvenOfCell({ unitMargin: 0.45, cut: 0.05 })).toEqual({ kind: "lift", lift: expect.closeTo(0.125, 14) });
    expect(breakEvenOfPlan(planMargins([aCell]))).toEqual({ kind: "lift", lift: expect.closeTo(0.125, 14) });
  });

  it("does not depend on the tax rate when prices with tax are scaled to the same net prices", () => {
    const taxed = { ...aCell, regularPrice: 1.21, price: 0.95 * 1.21, taxRate: 0.21 };
    expect(liftOf(breakEvenOfPlan(planMargins([taxed])))).toBeCloseTo(0.125, 12);
  });

  it("spreads a fixed cost less a lump sum over the base", () => {
    // 0.05 / 0.40 + (30 - 10) / (100 x 0.40)
    const breakEven = breakEvenOfCell({ unitMargin: 0.45, cut: 0.05, fixedCost: 30, lumpFunding: 10, baseUnits: 100 });
    expect(liftOf(breakEven)).toBeCloseTo(0.625, 14);
  });

  it("is lowered by the supplier's funding per unit, and not needed when it covers the cut", () => {
    expect(liftOf(breakEvenOfCell({ unitMargin: 0.45, cut: 0.05, fundingPerUnit: 0.02 }))).toBeCloseTo(0.03 / 0.42, 14);
    expect(breakEvenOfCell({ unitMargin: 0.45, cut: 0.05, fundingPerUnit: 0.05 })).toEqual({ kind: "none needed" });
    expect(breakEvenOfCell({ unitMargin: 0.45, cut: 0 })).toEqual({ kind: "none needed" });
  });

  it("cannot be reached when nothing is left of the margin", () => {
    expect(breakEvenOfCell({ unitMargin: 0.05, cut: 0.05 })).toEqual({ kind: "cannot break even" });
    expect(breakEvenOfPlan(planMargins([{ ...aCell, price: 0.5 }]))).toEqual({ kind: "cannot break even" });
  });

  it("is unknown where nothing is sold at base", () => {
    expect(breakEvenOfCell({ unitMargin: 0.45, cut: 0.05, fixedCost: 1 }).kind).toBe("unknown");
    expect(breakEvenOfPlan(planMargins([{ ...aCell, baseUnits: 0 }])).kind).toBe("unknown");
  });

  it("of a plan of one cell equals that of the cell", () => {
    const amounts = fc.record({
      unitCost: fc.double({ min: 0.1, max: 5, noNaN: true }), margin: fc.double({ min: 0.05, max: 4, noNaN: true }),
      cut: fc.double({ min: 0, max: 3, noNaN: true }), fundingPerUnit: fc.double({ min: 0, max: 1, noNaN: true }),
      fixedCost: fc.double({ min: 0, max: 500, noNaN: true }), lumpFunding: fc.double({ min: 0, max: 300, noNaN: true }),
      baseUnits: fc.double({ min: 1, max: 500, noNaN: true }), planUnits: fc.double({ min: 1, max: 900, noNaN: true }),
    });
    fc.assert(
      fc.property(amounts, ({ unitCost, margin, cut, ...rest }) => {
        fc.pre(Math.abs(margin - cut + rest.fundingPerUnit) > 1e-3);
        const cell: MoneyCell = { ...rest, unitCost, regularPrice: unitCost + margin, price: unitCost + margin - cut, taxRate: 0 };
        const plan = breakEvenOfPlan(planMargins([cell]), rest);
        const alone = breakEvenOfCell({ unitMargin: margin, cut, ...rest });
        if (alone.kind === "lift" && alone.lift > 1e-6) expect(liftOf(plan)).toBeCloseTo(alone.lift, 6);
        else if (alone.kind === "cannot break even") expect(plan).toEqual(alone);
      }),
      { seed: 20_260_608, numRuns: 500 },
    );
  });

  it("is the lift at which the net gain is zero", () => {
    const costs = { fixedCost: 40, lumpFunding: 12, similarProductsLostMargin: 3, dipAfter: 5 };
    const cells = [aCell, { ...aCell, baseUnits: 40, planUnits: 95, price: 0.8, fundingPerUnit: 0.04 }];
    const lift = liftOf(breakEvenOfPlan(planMargins(cells), costs));
    const planned = cells.reduce((sum, cell) => sum + cell.planUnits, 0);
    const factor = ((1 + lift) * 140) / planned;
    const atBreakEven = cells.map((cell) => ({ ...cell, planUnits: cell.planUnits * factor }));
    expect(netGain(planMargins(atBreakEven), costs)).toBeCloseTo(0, 10);
  });
});

describe("margins and gains", () => {
  it("are net of tax and count the supplier's funding", () => {
    const margins = planMargins([{ ...aCell, taxRate: 0.25, regularPrice: 1.25, price: 1.125, fundingPerUnit: 0.02 }]);
    expect(margins.base).toBeCloseTo(100 * 0.45, 12);
    expect(margins.plan).toBeCloseTo(120 * (0.9 - 0.55 + 0.02), 12);
    expect(netGain(margins, { fixedCost: 10, lumpFunding: 4 })).toBeCloseTo(120 * 0.37 - 45 - 6, 12);
    expect(netOfTax(1.21, 0.21)).toBeCloseTo(1, 15);
  });
});

describe("rounding to cents", () => {
  it.each([
    [1.005, 1.01], [2.675, 2.68], [-2.345, -2.35], [1.0049, 1], [0.1 + 0.2, 0.3], [1e-9, 0], [0.005, 0.01], [-0.001, 0],
    [123_456_789.125, 123_456_789.13], [1e21, 1e21], [Number.NaN, Number.NaN], [-Infinity, -Infinity],
  ])("makes %d to %d", (amount, cents) => {
    expect(roundToCents(amount)).toBe(cents);
  });

  it("never moves an amount by more than half a cent, and changes nothing twice", () => {
    fc.assert(
      fc.property(fc.double({ min: -1e9, max: 1e9, noNaN: true }), (amount) => {
        const rounded = roundToCents(amount);
        // 1e-7: binary spacing of numbers near 1e9.
        expect(Math.abs(rounded - amount)).toBeLessThanOrEqual(0.005 + 1e-7);
        expect(roundToCents(rounded)).toBe(rounded);
      }),
      { seed: 7, numRuns: 1_000 },
    );
  });
});
