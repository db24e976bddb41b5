import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { LocalRegressionTerm } from "@shared/engine";
import { basisLogSlopeRows, basisRows } from "@shared/engine/basis/term-basis";
import { largestDifference } from "../support/measures";
import { curveAt, driverRows, learn, valuesOf } from "./term-values";

const data = driverRows(2);
const term = (change: Partial<LocalRegressionTerm> = {}): LocalRegressionTerm => ({ kind: "local-regression", column: "price", span: 0.4, ...change });
const learnt = (change: Partial<LocalRegressionTerm> = {}, price: readonly number[] = data.price) => learn("local-regression", term(change), { price });
const runs = { numRuns: 30, seed: 20260104 };

describe.each([0, 1, 2] as const)("Rows of a local regression of degree %i", (degree) => {
  const { basis } = learnt({ degree });
  const between = fc.array(fc.double({ min: Math.min(...data.price), max: Math.max(...data.price), noNaN: true }), { minLength: 3, maxLength: 10 });

  it("sum to one, also beyond the range", () => {
    fc.assert(fc.property(between, (inside) => {
      const price = [...inside, 0.2, 7];
      const sums = curveAt(basis, new Float64Array(basis.at.length).fill(1), { price }, price.length);
      expect(largestDifference(sums, sums.map(() => 1))).toBeLessThan(1e-11);
    }), runs);
  });

  it("reproduce polynomials of their degree at and between the points", () => {
    fc.assert(fc.property(between, (price) => {
      const polynomial = (x: number) => (x - 2) ** degree;
      const drawn = curveAt(basis, basis.at.map(polynomial), { price }, price.length);
      expect(largestDifference(drawn, price.map(polynomial))).toBeLessThan(1e-11);
    }), runs);
  });

  it("have no weight on points as far as the span's last row, or farther", () => {
    const { values, width } = basisRows(basis, { price: [2] }) as { values: Float64Array; width: number };
    const distances = data.price.map((price) => Math.abs(price - 2)).sort((left, right) => left - right);
    const reach = distances[basis.neighbours - 1];
    for (let k = 0; k < width; k++) {
      const isNear = Math.abs(basis.at[k] - 2) < reach;
      expect(values[k] !== 0).toBe(isNear);
    }
  });
});

describe("A local regression", () => {
  // R 4.2.2: x <- c(1,1,2,3,3,3,4,6,7,7,9,10); y <- c(2,3,1,5,4,6,2,8,7,9,4,5);
  // fitted(loess(y ~ x, span = 0.6, degree = d, control = loess.control(surface = "direct")))
  const x = [1, 1, 2, 3, 3, 3, 4, 6, 7, 7, 9, 10];
  const y = [2, 3, 1, 5, 4, 6, 2, 8, 7, 9, 4, 5];
  const loess: Record<0 | 1 | 2, number[]> = {
    0: [2.82351423521975, 2.82351423521975, 3.31028289178267, 3.91944194419442, 3.91944194419442, 3.91944194419442, 4.2347757433617, 7.33293351055208, 6.89813718243969, 6.89813718243969, 6.36007448361647, 6.24578527209442],
    1: [2.03673060518271, 2.03673060518271, 3.09766493699036, 3.91944194419442, 3.91944194419442, 3.91944194419442, 4.68731812492091, 6.72425647572432, 6.94160719558909, 6.94160719558909, 5.43665637827994, 4.49361783603435],
    2: [2.5, 2.5, 1, 5, 5, 5, 4.23508176564249, 8, 7.96370459093927, 7.96370459093927, 5.79583241719085, 4.04510442294039],
  };

  it.each([0, 1, 2] as const)("of degree %i is R's loess with the direct surface, rows sharing values included", (degree) => {
    const { basis } = learn("local-regression", { kind: "local-regression", column: "x", span: 0.6, degree }, { x });
    const means = Array.from(basis.at, (value) => {
      const own = y.filter((_, row) => x[row] === value);
      return own.reduce((sum, response) => sum + response, 0) / own.length;
    });
    // Source above, 15 digits; required is 1e-8.
    expect(largestDifference(curveAt(basis, means, { x }, 12), loess[degree])).toBeLessThan(1e-12);
  });

  it("pools rows of one value: distinct points, rows and weights at each, and each row's own point", () => {
    const { basis, rows, seen, observedRange } = learn("local-regression", { kind: "local-regression", column: "x", span: 0.6 }, { x });
    expect([...basis.at]).toEqual([1, 2, 3, 4, 6, 7, 9, 10]);
    expect([...basis.rows]).toEqual([2, 1, 3, 1, 1, 2, 1, 1]);
    expect(basis.weights).toEqual(basis.rows);
    expect(basis.neighbours).toBe(7);
    expect(basis.degree).toBe(1);
    expect(rows).toEqual({ storage: "index", width: 8, index: Int32Array.of(0, 0, 1, 2, 2, 2, 3, 4, 5, 5, 6, 7), values: null });
    expect(seen).toEqual({ values: basis.at, counts: basis.rows });
    expect(observedRange).toEqual([1, 10]);
  });

  it("counts span x rows up to rounding as so many neighbours", () => {
    // 0.29 x 100 is 28.999999999999996 in floating point.
    expect(learnt({ span: 0.29 }, Array.from({ length: 100 }, (_, k) => k)).basis.neighbours).toBe(29);
  });

  it("gives points of more weight more say", () => {
    const once = learnt({ span: 0.8 }, [1, 2, 3, 4, 5, 6, 7, 8]).basis;
    const weighted = { ...once, weights: once.weights.map((weight, k) => (k === 2 ? 5 : weight)) };
    const [plain] = curveAt(once, [0, 0, 1, 0, 0, 0, 0, 0], { price: [3.4] }, 1);
    const [heavy] = curveAt(weighted, [0, 0, 1, 0, 0, 0, 0, 0], { price: [3.4] }, 1);
    expect(heavy).toBeGreaterThan(plain + 0.1);
  });

  it("goes on beyond the range as the line that touches the polynomial at the end", () => {
    const { basis } = learnt();
    const values = basis.at.map((price) => Math.sin(3 * price));
    const top = basis.at[basis.at.length - 1];
    const [a, b, c] = curveAt(basis, values, { price: [top, top + 1, top + 2] }, 3);
    const [slope] = valuesOf(basisLogSlopeRows(basis, { price: [top] })!, values, 1);
    expect(a - 2 * b + c).toBeCloseTo(0, 11);
    expect(b - a).toBeCloseTo(slope / top, 11);
  });

  it("has slopes by ln x that are a polynomial's own, with and without a logarithm; none for degree 0", () => {
    const price = [1.2, 1.9, 2.7];
    const plain = learnt({ degree: 2 }).basis;
    const square = valuesOf(basisLogSlopeRows(plain, { price })!, plain.at.map((value) => value ** 2), 3);
    expect(largestDifference(square, price.map((value) => 2 * value * value))).toBeLessThan(1e-10);
    const log = learnt({ log: true }).basis;
    const line = valuesOf(basisLogSlopeRows(log, { price })!, log.at.map((value) => 3 * value), 3);
    expect(largestDifference(line, [3, 3, 3])).toBeLessThan(1e-10);
    expect(basisLogSlopeRows(learnt({ degree: 0 }).basis, { price })).toBeNull();
  });

  it("keeps the mean of its rows over the data", () => {
    const { basis } = learnt();
    const values = basis.at.map((price) => Math.exp(price));
    const drawn = curveAt(basis, values, { price: data.price }, 60);
    const mean = drawn.reduce((sum, value) => sum + value, 0) / 60;
    expect(basis.centring.reduce((sum, share, k) => sum + share * values[k], 0)).toBeCloseTo(mean, 11);
  });

  it("lowers its degree where too few points have weight", () => {
    // The third nearest row of 5 lies at 9: only 5 itself is nearer.
    const { basis } = learnt({ span: 0.34, degree: 1 }, [1, 1.1, 1.2, 5, 9, 9.1, 9.2, 9.3, 9.4]);
    const [value] = curveAt(basis, basis.at.map((at) => at * at), { price: [5] }, 1);
    expect(value).toBeCloseTo(25, 12);
  });
});

describe("A local regression refuses, by name and rule,", () => {
  const many = Array.from({ length: 2001 }, (_, row) => row);
  const cases: { rule: string; change?: Partial<LocalRegressionTerm>; price: number[]; code: string; message: string }[] = [
    {
      rule: "more than 2,000 rows", price: many, code: "spec-invalid",
      message: 'Term "price": a local regression takes up to 2000 rows; the data has 2001. Use a smooth.',
    },
    {
      rule: "too few neighbours", change: { span: 0.2, degree: 2 }, price: many.slice(0, 15), code: "spec-invalid",
      message: 'Term "price": span 0.2 of 15 rows takes the nearest 3; degree 2 needs at least 4.',
    },
    {
      rule: "a window of one value", change: { span: 0.4 }, price: [1, 2, 3, 3, 3, 3, 4, 5, 6, 7], code: "column-few-values",
      message: 'Term "price": the nearest 4 rows all have the value 3 of column "price"; use a larger span.',
    },
    {
      rule: "a constant column", price: [2, 2, 2, 2], code: "column-constant",
      message: 'Term "price": column "price" is constant (2); a curve needs values that vary.',
    },
  ];

  it.each(cases)("$rule", ({ change, price, code, message }) => {
    expect(() => learnt(change, price)).toThrow(expect.objectContaining({ name: "EngineError", code, message }));
  });
});
