import { fitModel, predict } from "@shared/engine";
import type { FittedModel, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKindRows, families, modelOf } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

const rows = everyKindRows(8);
const endless = { penalty: 1e13 } as const;
const promotion: TermSpec = { kind: "factor", column: "promotion" };
const line: TermSpec = { kind: "linear", column: "price", log: true };
const price: TermSpec = { kind: "smooth", column: "price", log: true, size: 7 };
const partOf = (model: FittedModel, id: string) => predict(model, rows).contributions[id];

/** An endless penalty leaves of a coefficient about its own over 1e13 of the data's. */
const rounding = 1e-7;

describe.each(families)("Under a penalty without end, %s,", (family) => {
  const fit = (...terms: TermSpec[]) => fitModel(modelOf(family, terms), rows);

  it("a smooth is a straight line", () => {
    const stiff = fit({ ...price, smoothness: endless } as TermSpec);
    expect(largestDifference(stiff.fitted, fit(line).fitted)).toBeLessThan(rounding * Math.max(...stiff.fitted));
    expect(stiff.terms[0].edf).toBeCloseTo(1, 7);
  });

  it("a smooth per level is a line per level", () => {
    const stiff = fit(promotion, { ...price, by: "promotion", smoothness: endless } as TermSpec);
    const isOf = (level: string) => rows.promotion.map((own) => Number(own === level));
    const lines = ["display", "feature", "none"].map((level): TermSpec => ({ kind: "linear", column: `price ${level}` }));
    const data = { ...rows, ...Object.fromEntries(["display", "feature", "none"].map((level) => [`price ${level}`, isOf(level).map((own, row) => own * Math.log(rows.price[row]))])) };
    const plain = fitModel(modelOf(family, [promotion, ...lines]), data);
    expect(largestDifference(stiff.fitted, plain.fitted)).toBeLessThan(rounding * Math.max(...stiff.fitted));
    expect(stiff.terms[1].edf).toBeCloseTo(3, 6);
  });

  it("a smooth times a number is that number and its product with the column", () => {
    const stiff = fit({ ...price, by: "depth", smoothness: endless } as TermSpec);
    const product = rows.depth.map((depth, row) => depth * Math.log(rows.price[row]));
    const plain = fitModel(modelOf(family, [{ kind: "linear", column: "depth" }, { kind: "linear", column: "product" }]), { ...rows, product });
    expect(largestDifference(stiff.fitted, plain.fitted)).toBeLessThan(rounding * Math.max(...stiff.fitted));
    expect(stiff.terms[0].edf).toBeCloseTo(2, 6);
  });

  it.each<[string, TermSpec]>([
    ["a circle", { kind: "cyclic-smooth", column: "season", period: [0, 1], size: 8, smoothness: endless }],
    ["a level per group", { kind: "random-effect", column: "store", smoothness: endless }],
    ["a slope per group", { kind: "random-effect", column: "store", by: "depth", smoothness: endless }],
    ["a slowly moving level", { kind: "random-walk", column: "week", smoothness: endless }],
  ])("%s is nothing", (_name, term) => {
    const model = fit(line, term);
    expect(partOf(model, model.terms[1].id).every((value) => Math.abs(value) < rounding)).toBe(true);
    expect(model.terms[1].edf).toBeLessThan(1e-6);
    expect(largestDifference(model.fitted, fit(line).fitted)).toBeLessThan(rounding * Math.max(...model.fitted));
  });

  it("curves per group are the chain's curve", () => {
    const chain: TermSpec = { ...price, smoothness: { penalty: 2 } } as TermSpec;
    const model = fit(chain, { kind: "factor-smooth", column: "price", log: true, group: "store", size: 5, smoothness: endless });
    expect(largestDifference(model.fitted, fit(chain).fitted)).toBeLessThan(rounding * Math.max(...model.fitted));
  });

  it("a surface is the product of two lines", () => {
    const model = fit({ kind: "tensor-product", columns: ["price", "temperature"], smoothness: endless });
    const part = partOf(model, "price:temperature");
    const centred = (column: number[]) => column.map((value) => value - column.reduce((sum, own) => sum + own, 0) / column.length);
    const [left, right] = [centred(rows.price), centred(rows.temperature)];
    const products = left.map((value, row) => value * right[row]);
    const at = products.reduce((best, value, row) => (Math.abs(value) > Math.abs(products[best]) ? row : best), 0);
    expect(largestDifference(part, products.map((value) => (value * part[at]) / products[at]))).toBeLessThan(1e-6);
    expect(model.terms[0].edf).toBeCloseTo(1, 6);
  });
});

describe.each(families)("Degrees of freedom asked for are those had, %s:", (family) => {
  it.each<[string, number, TermSpec[]]>([
    ["a smooth", 3.3, [price]],
    ["a smooth per level", 7.5, [promotion, { ...price, by: "promotion" } as TermSpec]],
    ["a smooth times a number", 3.5, [{ ...price, by: "depth" } as TermSpec]],
    ["a circle", 2.2, [{ kind: "cyclic-smooth", column: "season", period: [0, 1], size: 8 }]],
    ["a surface", 4.4, [{ kind: "tensor-product", columns: ["price", "temperature"] }]],
    ["a smooth beside groups", 2.7, [{ kind: "random-effect", column: "store" }, price]],
    ["a smooth beside a circle that is chosen", 2.7, [{ kind: "cyclic-smooth", column: "season", period: [0, 1] }, price]],
  ])("%s", (_name, df, terms) => {
    const asked = terms.map((term, at) => (at === terms.length - 1 ? { ...term, smoothness: { df } } as TermSpec : term));
    const model = fitModel(modelOf(family, asked), rows);
    expect(model.converged).toBe(true);
    const own = model.terms[terms.length - 1];
    expect(Math.abs(own.edf - df)).toBeLessThan(1e-6);
  });
});

describe("Degrees of freedom asked of a curve of a given shape", () => {
  const asked = { ...price, smoothness: { df: 4.5 } } as TermSpec;

  it("are those of the curve before its shape: the penalty is the same, and what the shape takes is not spent", () => {
    const [free, shaped] = [asked, { ...asked, shape: "increasing" } as TermSpec].map((term) => fitModel(modelOf("gaussian", [term]), rows));
    expect(shaped.terms[0].penalties[0] / free.terms[0].penalties[0]).toBeCloseTo(1, 9);
    expect(free.terms[0].edf).toBeCloseTo(4.5, 8);
    expect(shaped.terms[0].edf).toBeLessThan(4.4);
  });

  it("leave those of a curve beside it as they are asked", () => {
    const circle: TermSpec = { kind: "cyclic-smooth", column: "season", period: [0, 1], size: 8, smoothness: { df: 2.2 } };
    for (const family of families) {
      const model = fitModel(modelOf(family, [{ ...asked, shape: "increasing" } as TermSpec, circle]), rows);
      expect(Math.abs(model.terms[1].edf - 2.2)).toBeLessThan(1e-6);
      expect(model.terms[0].edf).toBeLessThan(4.4);
    }
  });
});
