import { describe, expect, it } from "vitest";
import { termCoordinates } from "@shared/engine/penalty/term-transform";
import { driverRows, learn } from "../basis/term-values";

const data = driverRows(9);

describe("Coordinates of terms on groups", () => {
  it("are a random effect's coefficients themselves under one ridge", () => {
    const { basis } = learn("random-effect", { kind: "random-effect", column: "store" }, data);
    expect(termCoordinates(basis)).toEqual({
      transform: { form: "blocks", matrix: Float64Array.of(1), rows: 1, columns: 1, count: 4, unpenalised: 0 },
      rawWidth: 4, unpenalised: 0, penalised: 4, penalties: [{ start: 0, end: 1, diagonal: null }], grouped: true,
    });
  });

  it("are level, slope and wiggly part of each group's curve under three ridges", () => {
    const { basis } = learn("factor-smooth", { kind: "factor-smooth", column: "price", group: "store", size: 7 }, data);
    expect(termCoordinates(basis)).toEqual({
      transform: { form: "blocks", matrix: basis.toCoefficients, rows: 7, columns: 7, count: 4, unpenalised: 0 },
      rawWidth: 28, unpenalised: 0, penalised: 28, grouped: true,
      penalties: [{ start: 0, end: 1, diagonal: null }, { start: 1, end: 2, diagonal: null }, { start: 2, end: 7, diagonal: null }],
    });
  });
});

describe("Coordinates of unpenalised terms", () => {
  it("are a straight line's slope per standard deviation", () => {
    const { basis } = learn("linear", { kind: "linear", column: "temperature" }, data);
    expect(termCoordinates(basis)).toEqual({
      transform: { form: "scaled", factor: 1 / basis.scale }, rawWidth: 1, unpenalised: 1, penalised: 0, penalties: [], grouped: false,
    });
  });

  it("are a factor's levels but the reference", () => {
    const { basis } = learn("factor", { kind: "factor", column: "store", reference: "s2" }, data);
    expect(termCoordinates(basis)).toEqual({
      transform: { form: "without", leftOut: 2 }, rawWidth: 4, unpenalised: 3, penalised: 0, penalties: [], grouped: false,
    });
  });

  it("are none of a local regression's", () => {
    const { basis } = learn("local-regression", { kind: "local-regression", column: "price", span: 0.5 }, data);
    expect(termCoordinates(basis)).toMatchObject({ rawWidth: basis.at.length, unpenalised: 0, penalised: 0, penalties: [], grouped: false });
  });
});
