import { localRegression } from "@shared/engine/basis/local-regression";
import { localRows } from "@shared/engine/basis/local-rows";
import { describe, expect, it } from "vitest";
import { largestDifference, largestRelativeDifference } from "./support/measures";
import { committedReference } from "./support/reference-files";

const { data, between, fits } = committedReference("natural-and-local").local;

describe("The linear operator of a local regression is that of stats::loess to 1e-8", () => {
  it.each(fits)("of degree $degree over a span of $span: fitted values and errors, at the rows and between them", (fit) => {
    const { degree, span } = fit;
    const { basis } = localRegression.learn({ kind: "local-regression", column: "x", span, degree }, "x", data);
    const pooled = Float64Array.from(basis.at, (value, k) =>
      data.y.reduce((sum, y, row) => sum + (data.x[row] === value ? y : 0), 0) / basis.weights[k]);
    for (const [x, reference] of [[data.x, fit], [between, fit.there]] as const) {
      const { values, width } = localRows(basis, Float64Array.from(x));
      const own = x.map((_, row) => values.subarray(row * width, (row + 1) * width));
      const fitted = own.map((weights) => weights.reduce((sum, weight, k) => sum + weight * pooled[k], 0));
      const errors = own.map((weights) => Math.sqrt(weights.reduce((sum, weight, k) => sum + weight ** 2 / basis.weights[k], 0)));
      expect(largestDifference(fitted, reference.fitted)).toBeLessThan(1e-8);
      expect(largestRelativeDifference(errors.map((error) => fit.residualScale * error), reference.standardError)).toBeLessThan(1e-8);
    }
  });
});
