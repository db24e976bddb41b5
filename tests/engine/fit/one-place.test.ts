import { fitModel } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKindRows, modelOf } from "../support/every-kind-rows";

describe("A circle of which all rows lie in one place", () => {
  const rows = everyKindRows(3, 60);
  const turns = rows.price.map((_, row) => row % 4);
  const spec = modelOf("gaussian", [{ kind: "cyclic-smooth", column: "turns", period: [0, 1], size: 12 }]);

  it("has a curve of no degrees of freedom, to the last digit, and a finite fit", () => {
    const model = fitModel(spec, { ...rows, turns });
    expect(model.terms[0].edf).toBeGreaterThanOrEqual(0);
    expect(model.terms[0].edf).toBeLessThan(1e-9);
    expect([...model.fitted, ...model.covariance, model.criterion].every(Number.isFinite)).toBe(true);
  });
});
