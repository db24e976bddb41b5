import { describe, expect, it } from "vitest";
import { createRandom } from "../../demo/random";
import { drawUnits } from "../../demo/stages/units";

const count = 30_000;

function momentsOf(row: { mean: number; dispersion: number; soldByWeight: boolean }) {
  const random = createRandom(1, JSON.stringify(row));
  const units = Array.from({ length: count }, () => drawUnits({ ...row, random }));
  const mean = units.reduce((sum, value) => sum + value, 0) / count;
  const variance = units.reduce((sum, value) => sum + (value - mean) ** 2, 0) / count;
  return { units, mean, variance };
}

describe("Units of a row", () => {
  it.each([
    { mean: 4, dispersion: 1.8, soldByWeight: false },
    { mean: 180, dispersion: 2.4, soldByWeight: false },
    { mean: 60, dispersion: 1, soldByWeight: false },
    { mean: 24, dispersion: 0.5, soldByWeight: true },
  ])("have the mean asked for and a variance of dispersion x mean: $mean, $dispersion", (row) => {
    const { mean, variance } = momentsOf(row);
    expect(Math.abs(mean - row.mean)).toBeLessThan(4 * Math.sqrt((row.dispersion * row.mean) / count));
    // The fourth moment of these laws is at most 3 + 6 x dispersion / mean + 2; 5 % is more than four errors.
    expect(Math.abs(variance / (row.dispersion * row.mean) - 1)).toBeLessThan(0.05);
  });

  it("are whole numbers, unless sold by weight: then grams", () => {
    expect(momentsOf({ mean: 20, dispersion: 1.5, soldByWeight: false }).units.every(Number.isInteger)).toBe(true);
    const weights = momentsOf({ mean: 20, dispersion: 0.5, soldByWeight: true }).units;
    expect(weights.every((weight) => /^\d+(\.\d{1,3})?$/.test(String(weight)))).toBe(true);
    expect(weights.filter(Number.isInteger).length).toBeLessThan(count / 100);
  });
});
