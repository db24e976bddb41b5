import { describe, expect, it } from "vitest";
import { covariate, levelColumn, levelName, numberColumn, quoted, rawColumn, rowCount } from "@shared/engine/basis/columns";
import { checkDistinct, checkSize, fewValuesWarning } from "@shared/engine/basis/curve-checks";
import { learnLevels } from "@shared/engine/basis/levels";
import { outsideRange, rangeOf } from "@shared/engine/basis/ranges";
import { columnsOf, termId } from "@shared/engine/basis/term-basis";
import { fitModel } from "@shared/engine";
import type { ModelData, ModelSpec } from "@shared/engine";
import { seededUniform } from "../support/generator";

const data: ModelData = { price: [1, 2.5, 4], store: ["a", "b", "a"], weekly: Float64Array.of(1, 2, 3) };
/** Data as it may come from outside. */
const untyped = (text: string) => JSON.parse(text) as ModelData;

describe("A column is refused, by name, role, row and value,", () => {
  const cases: { rule: string; attempt: () => unknown; code: string; message: string }[] = [
    { rule: "where it is missing", attempt: () => rawColumn(data, "depth", "linear"), code: "column-missing", message: 'Column "depth" (linear) is missing; the data has "price", "store", "weekly".' },
    { rule: "where there are none", attempt: () => rawColumn({}, "depth", "linear"), code: "column-missing", message: 'Column "depth" (linear) is missing; the data has no columns.' },
    { rule: "where only an object's own heritage has its name", attempt: () => rawColumn(data, "toString", "linear"), code: "column-missing", message: 'Column "toString" (linear) is missing; the data has "price", "store", "weekly".' },
    { rule: "of another length", attempt: () => rowCount({ ...data, short: [1] }, [["price", "linear"], ["short", "offset"]]), code: "length-mismatch", message: 'Column "short" has 1 rows, "price" has 3; all columns must have the same length.' },
    { rule: "of text for numbers", attempt: () => numberColumn(data, "store", "smooth"), code: "column-kind", message: 'Column "store" (smooth) must hold numbers; row 1 is "a".' },
    { rule: "with a hole", attempt: () => numberColumn(untyped('{"price":[1,null]}'), "price", "smooth"), code: "column-kind", message: 'Column "price" (smooth) must hold numbers; row 2 is null.' },
    { rule: "with NaN", attempt: () => numberColumn({ price: [1, Number.NaN] }, "price", "smooth"), code: "value-not-finite", message: 'Column "price" (smooth) must be finite; row 2 is NaN.' },
    { rule: "without an end", attempt: () => numberColumn({ price: Float64Array.of(-Infinity) }, "price", "smooth"), code: "value-not-finite", message: 'Column "price" (smooth) must be finite; row 1 is -Infinity.' },
    { rule: "beyond reason", attempt: () => numberColumn({ price: [1e50, 1.1e50] }, "price", "smooth"), code: "value-not-finite", message: 'Column "price" (smooth) must be within 1e+50 of 0; row 2 is 1.1e+50.' },
    { rule: "of zero under a logarithm", attempt: () => covariate({ price: [1, 0] }, { column: "price", log: true }, "linear"), code: "value-not-positive", message: 'Column "price" (linear, log) must be above 0 to have a logarithm; row 2 is 0.' },
    { rule: "below zero under a logarithm", attempt: () => covariate({ price: [-0.5] }, { column: "price", log: true }, "linear"), code: "value-not-positive", message: 'Column "price" (linear, log) must be above 0 to have a logarithm; row 1 is -0.5.' },
    { rule: "of levels that are neither", attempt: () => levelColumn(untyped('{"deal":["yes",true]}'), "deal", "factor"), code: "column-kind", message: 'Column "deal" (factor) must hold text or numbers; row 2 is true.' },
    { rule: "of a level without an end", attempt: () => levelColumn({ deal: [0, Infinity] }, "deal", "factor"), code: "value-not-finite", message: 'Column "deal" (factor) must be finite; row 2 is Infinity.' },
    { rule: "of a constant", attempt: () => checkDistinct(Float64Array.of(2), "price", "p"), code: "column-constant", message: 'Term "p": column "price" is constant (2); a curve needs values that vary.' },
    { rule: "of all but a constant", attempt: () => checkDistinct(Float64Array.of(0, 1e-51, 2e-51, 3e-51), "price", "p"), code: "column-constant", message: 'Term "p": column "price" runs from 0 to 3e-51; a curve needs values at least 1e-50 apart.' },
    { rule: "of three values", attempt: () => checkDistinct(Float64Array.of(0, 1, 2), "price", "p"), code: "column-few-values", message: 'Term "p": column "price" has 3 distinct values; a curve needs at least 4. Use a straight line or a factor.' },
    ...[3, 4.5, 201, Number.NaN, -8].map((size) => ({
      rule: `for a size of ${size}`, attempt: () => checkSize(size, "p"), code: "spec-invalid", message: `Term "p": size is ${size}; it must be a whole number from 4 to 200.`,
    })),
  ];

  it.each(cases)("$rule", ({ attempt, code, message }) => {
    expect(attempt).toThrow(expect.objectContaining({ name: "EngineError", code, message }) as Error);
  });
});

describe("A column is taken", () => {
  it("as it is, where it is numbers already, and as a copy from a list", () => {
    expect(numberColumn(data, "weekly", "linear")).toBe(data.weekly);
    expect(numberColumn({ price: [1e50, -1e50, 0] }, "price", "linear")).toEqual(Float64Array.of(1e50, -1e50, 0));
    expect(covariate(data, { column: "weekly" }, "linear")).toBe(data.weekly);
  });

  it("by its logarithm, the column left as it was", () => {
    const price = Float64Array.of(1, Math.E);
    expect(covariate({ price }, { column: "price", log: true }, "linear")).toEqual(Float64Array.of(0, 1));
    expect(price).toEqual(Float64Array.of(1, Math.E));
  });

  it("as levels, numbers in their shortest form", () => {
    expect(levelColumn({ deal: [1, 0.5, -0, 1e21] }, "deal", "factor")).toEqual(["1", "0.5", "0", "1e+21"]);
    expect(levelName("", { column: "deal", role: "factor", row: 0 })).toBe("");
  });

  it("with as many rows as all others, none of no columns", () => {
    expect(rowCount(data, [["price", "linear"], ["store", "factor"]])).toBe(3);
    expect(rowCount(data, [])).toBe(0);
    expect(rowCount({ price: [] }, [["price", "linear"]])).toBe(0);
  });

  it("as carrying a curve from four values 1e-50 apart on, with a word where they are fewer than the splines", () => {
    expect(() => checkDistinct(Float64Array.of(0, 1e-50, 2e-50, 3e-50), "price", "p")).not.toThrow();
    expect([checkSize(4, "p"), checkSize(200, "p")]).toEqual([4, 200]);
    expect(fewValuesWarning(10, 10, "p")).toEqual([]);
    expect(fewValuesWarning(9, 10, "p")).toEqual([{
      code: "few-distinct-values", term: "p", message: 'Term "p" has 9 distinct values for a curve of size 10: between them its shape comes from the smoothness penalty alone.',
    }]);
  });

  it("quoted by name", () => {
    expect(quoted(["price", "depth"])).toBe('"price", "depth"');
    expect(quoted([])).toBe("");
  });
});

describe("Levels stand in one order however their rows come", () => {
  const shuffled = (values: readonly (string | number)[], seed: number) => {
    const uniform = seededUniform(seed);
    return values.map((value) => ({ value, key: uniform() })).sort((left, right) => left.key - right.key).map(({ value }) => value) as string[];
  };

  it.each<[string, (string | number)[], string[]]>([
    ["numbers by size", ["10", "9", "-3", "0.5", "1e2"], ["-3", "0.5", "9", "10", "1e2"]],
    ["words by letters, capitals first", ["b", "a", "B", "ä"], ["B", "a", "b", "ä"]],
    ["numbers before words, though words begin with digits", ["9", "10", "1a", "100", "99x", "a"], ["9", "10", "100", "1a", "99x", "a"]],
    ["numbers given as such and as text", [10, "9", 100, "1a", "10"], ["9", "10", "100", "1a"]],
    ["an empty name and blanks among words", ["", " ", "9", "10", "1a"], ["9", "10", "", " ", "1a"]],
    ["what only looks like a number among words", ["Infinity", "2", "NaN", "10", "-Infinity"], ["2", "10", "-Infinity", "Infinity", "NaN"]],
    ["two writings of one number by letters", ["1.0", "1", "01"], ["01", "1", "1.0"]],
  ])("%s", (_name, values, levels) => {
    for (let seed = 1; seed < 12; seed++) {
      const order = shuffled([...values, ...values], seed);
      const learnt = learnLevels({ store: order }, "store", "factor");
      expect(learnt.levels).toEqual(levels);
      expect(order.map((_value, row) => learnt.levels[learnt.index[row]])).toEqual(order.map(String));
    }
  });
});

describe("A factor whose names mix numbers and words", () => {
  const promotion = ["9", "10", "1a", "100", "99x", "1a", "9", "100", "10", "99x", "9", "1a"];
  const y = promotion.map((_level, row) => (row * 7) % 5);

  it("has the same reference and coefficients whatever row comes first", () => {
    const spec: ModelSpec = { response: "y", family: "gaussian", terms: [{ kind: "factor", column: "promotion" }] };
    const first = fitModel(spec, { promotion, y });
    expect(first.coefficientNames).toEqual(["intercept", "promotion[9]", "promotion[10]", "promotion[100]", "promotion[1a]", "promotion[99x]"]);
    for (let start = 1; start < 12; start++) {
      const turned = <Value>(column: Value[]) => [...column.slice(start), ...column.slice(0, start)];
      const model = fitModel(spec, { promotion: turned(promotion), y: turned(y) });
      expect(model.coefficientNames).toEqual(first.coefficientNames);
      model.coefficients.forEach((value, k) => expect(value).toBeCloseTo(first.coefficients[k], 10));
    }
  });
});

describe("Terms", () => {
  it("are named by their columns, unless they have a name", () => {
    expect(termId({ kind: "linear", column: "price" })).toBe("price");
    expect(termId({ kind: "smooth", column: "price", by: "store" })).toBe("price:store");
    expect(termId({ kind: "factor-smooth", column: "price", group: "store" })).toBe("price:store");
    expect(termId({ kind: "random-effect", column: "store" })).toBe("store");
    expect(termId({ kind: "tensor-product", columns: ["price", "week"] })).toBe("price:week");
    expect(termId({ kind: "smooth", column: "price", id: "own price" })).toBe("own price");
  });

  it("give a list of columns of its own", () => {
    const columns: [string, string] = ["price", "week"];
    columnsOf({ kind: "tensor-product", columns }).push("other");
    expect(columns).toEqual(["price", "week"]);
  });

  it("lie outside a range beyond its ends only, and nowhere without one", () => {
    expect(rangeOf(Float64Array.of(1, 4, 9))).toEqual([1, 9]);
    expect([...outsideRange([1, 9], Float64Array.of(0.999, 1, 9, 9.001))]).toEqual([1, 0, 0, 1]);
    expect([...outsideRange(null, Float64Array.of(1e9))]).toEqual([0]);
  });
});
