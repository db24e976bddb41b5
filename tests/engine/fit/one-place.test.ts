import { fitModel, predict } from "@shared/engine";
import type { TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, modelOf } from "../support/every-kind-rows";

/** Rows that all lie at one place of a circle, by whole turns: its columns are constants, and nothing is left of them but rounding. */
const rows = everyKindRows(3, 60);
const turns = rows.y.map((_, row) => (row % 4) - 1);
const besides: [string, TermSpec[]][] = [["alone", []], ["beside a curve", everyKind.smooth], ["beside a regression spline and a factor", [...everyKind["natural spline"], ...everyKind.factor]]];

describe.each(families)("A circle that all rows of a %s model lie at one place of", (family) => {
  it.each(besides.flatMap(([name, terms]) => [5, 8, 12].map((size) => ({ name, terms, size }))))("spends no degrees of freedom, and none below: $name, size $size", ({ terms, size }) => {
    const model = fitModel(modelOf(family, [...terms, { kind: "cyclic-smooth", column: "turns", period: [0, 1], size }]), { ...rows, turns });
    const { edf, id } = model.terms[model.terms.length - 1];
    expect(Math.abs(edf)).toBeLessThan(1e-9);
    expect(predict(model, { ...rows, turns }).contributions[id].every((value) => Math.abs(value) < 1e-6)).toBe(true);
    expect(model.converged).toBe(true);
  });
});
