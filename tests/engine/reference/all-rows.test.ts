import { fitModel, predict } from "@shared/engine";
import { describe, expect, it } from "vitest";
import type { Rows } from "../../bench/engine/rows";
import { rowsWhere } from "../../bench/engine/rows";
import { works } from "../../bench/engine/works";
import { largestDifference, standardDeviation } from "../support/measures";
import { freshReference } from "../support/reference-files";

/*
 * The two large models that the bench times, against mgcv without discretisation (see all-rows.R). With R 4.2.2 and mgcv
 * 1.8-41: all rows 6e-7 of a standard deviation, curves per store 5e-8; bam's own search stops at about that.
 */
const reference = freshReference("all-rows");
const { logmove, units, price, woy, deal, feat, store, brand } = reference.data;
const rows: Rows = {
  logmove: Float64Array.from(logmove), units: Float64Array.from(units), price: Float64Array.from(price), woy: Float64Array.from(woy),
  deal: Float64Array.from(deal), feat: Float64Array.from(feat), store: store.map(String), brand: brand.map(String),
};

describe("Large models agree with the reference package's", () => {
  it.each([
    { name: "everything", data: rows, within: { fitted: 1e-5, edf: 1e-3, dispersion: 1e-5 } },
    { name: "stores", data: rowsWhere(rows, (row) => rows.brand[row] === "7"), within: { fitted: 1e-3, edf: 0.02, dispersion: 1e-3 } },
  ] as const)("$name", ({ name, data, within }) => {
    const work = works.find((one) => one.name === name);
    if (!work) throw new Error(`The bench has no work ${name}.`);
    const model = fitModel(work.spec, data);
    const expected = reference[name];
    expect(model.converged).toBe(true);
    const gap = largestDifference(predict(model, data).linearPredictor, expected.linearPredictor);
    expect(gap / standardDeviation(expected.linearPredictor)).toBeLessThan(within.fitted);
    expect(Math.abs(model.edf - expected.totalEdf)).toBeLessThan(within.edf);
    expect(Math.abs(model.dispersion / expected.dispersion - 1)).toBeLessThan(within.dispersion);
  });
});
