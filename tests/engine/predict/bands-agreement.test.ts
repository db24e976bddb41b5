import { fitModel, termCurve } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { correctedModel } from "@shared/engine/predict/corrected-model";
import { describe, expect, it } from "vitest";
import { largestDifference } from "../support/measures";
import { committedReference } from "../support/reference-files";
import type { Bands } from "../support/reference-shapes";

/** What tests/engine/reference/bands.R wrote; the calls are in it. */
const bands = committedReference("bands");
const { series } = committedReference("additive-models");
type CurveErrors = Bands["series"][number]["gaussian"]["pointwise"];
const terms: ModelSpec["terms"] = [
  { kind: "smooth", column: "price", log: true, size: 8 },
  { kind: "cyclic-smooth", column: "woy", period: [0.5, 52.5], size: 12 },
  { kind: "factor", column: "deal" },
  { kind: "linear", column: "feat" },
];

/** Largest difference of standard errors at every sixth row, over the largest error. */
function distance(model: FittedModel, expected: CurveErrors, at: { data: CurveErrors; band?: "pointwise" | "with-mean" | "corrected" }): number {
  return Math.max(...(["price", "woy"] as const).map((column) => {
    const some = at.data[column].filter((_value, row) => row % 6 === 0);
    const { standardError } = termCurve(model, column, { at: some, band: at.band });
    return largestDifference(standardError, expected[column]) / Math.max(...expected[column]);
  }));
}

describe("Standard errors of curves agree with mgcv 1.8-41 (R 4.2.2)", () => {
  it("are made with the versions named", () => expect([bands.madeWith.r, bands.madeWith.packages.mgcv]).toEqual(["4.2.2", "1.8.41"]));

  describe.each(bands.series)("on product $series of store 2", ({ series: which, gaussian, quasiPoisson }) => {
    const { data } = series[which - 1];
    const normal = fitModel({ response: "logmove", family: "gaussian", terms }, data);

    it("with the mean's error, as predict(type = \"iterms\"): 1e-6", () => {
      expect(distance(normal, gaussian.withMean, { data, band: "with-mean" })).toBeLessThan(1e-6);
    });

    it("with the mean's error of counts, against bam: 1e-5, as its penalties are looser", () => {
      const counts = fitModel({ response: "units", family: "quasi-poisson", terms }, data);
      expect(distance(counts, quasiPoisson.withMean, { data, band: "with-mean" })).toBeLessThan(1e-5);
    });

    it("with the penalties' error, as predict(unconditional = TRUE): 1e-5", () => {
      expect(distance(correctedModel(normal), gaussian.unconditional, { data })).toBeLessThan(1e-5);
      expect(distance(normal, gaussian.corrected, { data, band: "corrected" })).toBeLessThan(1e-5);
      // Which is not the band without: it is wider by more than the tolerance.
      expect(distance(normal, gaussian.unconditional, { data, band: "pointwise" })).toBeGreaterThan(0.02);
    });
  });
});
