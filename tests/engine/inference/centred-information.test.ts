import { fitModel, predict } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import { centredInformation } from "@shared/engine/inference/centred-information";
import { contributionRange } from "@shared/engine/inference/contribution-range";
import { withCentredLevels } from "@shared/engine/inference/level-centring";
import { bilinear } from "@shared/engine/inference/penalty-share";
import { describe, expect, it } from "vitest";
import { exampleModel, exampleNames, exampleTerms, partsOf, storeRows } from "./support/example-models";

const data = storeRows(3);
const packed = (row: number, column: number) => (row >= column ? (row * (row + 1)) / 2 + column : (column * (column + 1)) / 2 + row);
const relative = (value: number, expected: number) => Math.abs(value / expected - 1);

/** Sum of w f^2 over the rows, f a term's contribution. */
function squaresOf(model: FittedModel, id: string, weights: readonly number[] | null): number {
  const contribution = predict(model, data).contributions[id];
  return contribution.reduce((sum, value, row) => sum + (weights?.[row] ?? 1) * value * value, 0);
}

describe.each(exampleNames)("The information of a model with %s", (name) => {
  it.each([null, "weight"])("has in its quadratic form the squares of each term's contributions (weights: %s; 1e-8)", (weights) => {
    const model = exampleModel(name, weights === null ? {} : { weights });
    const { information, places } = partsOf(model);
    for (const place of places) {
      if (place.isGrouped) continue;
      const estimate = Float64Array.from(place.positions, (position) => information.coordinates[position]);
      const squares = bilinear(estimate, centredInformation(information, place), estimate, estimate.length);
      const expected = squaresOf(model, place.term.id, weights === null ? null : data.weight);
      // A term whose penalty went to its limit is zero but for rounding.
      if (expected > 1e-10) expect(relative(squares, expected), place.term.id).toBeLessThan(1e-8);
    }
  });

  it("has each term's contributions within the range the report gives, and reaches both ends", () => {
    const model = exampleModel(name);
    const { contributions } = predict(model, data);
    for (const term of model.terms) {
      const isPerUnit = term.basis.kind === "scaled-smooth" || (term.basis.kind === "random-effect" && term.basis.by !== null);
      if (isPerUnit) continue;
      const [least, most] = contributionRange(model, term);
      expect(least, term.id).toBeCloseTo(Math.min(...contributions[term.id]), 9);
      expect(most, term.id).toBeCloseTo(Math.max(...contributions[term.id]), 9);
    }
  });
});

describe("Ranges per unit of what multiplies a term", () => {
  it("times that number give its contributions' bounds", () => {
    const model = exampleModel("a curve times a number");
    const [least, most] = contributionRange(model, model.terms[0]);
    predict(model, data).contributions["price:temperature"].forEach((value, row) => {
      const ends = [least * data.temperature[row], most * data.temperature[row]];
      expect(value).toBeGreaterThan(Math.min(...ends) - 1e-9);
      expect(value).toBeLessThan(Math.max(...ends) + 1e-9);
    });
  });
});

describe("Curves per level", () => {
  const terms: ModelSpec["terms"] = [...exampleTerms["a curve per level"], { kind: "random-effect", column: "store" }];
  const models = [
    exampleModel("a curve per level"),
    exampleModel("a curve per level", { weights: "weight" }),
    exampleModel("a curve per level", { terms: [terms[0], { ...terms[1], size: 6 } as ModelSpec["terms"][number], terms[2]] }),
    exampleModel("a curve per level", { terms: terms.map((term) => (term.kind === "factor" ? { ...term, reference: "hills" } : term)) }),
  ];

  it("are centred over their level's rows: without weights they meet neither the intercept nor the factor", () => {
    for (const model of [models[0], models[2], models[3]]) {
      const information = withCentredLevels(model, model.information!);
      const [factor, curves] = partsOf(model).places;
      for (const position of curves.positions) {
        const own = information.shared[packed(position, position)];
        for (const other of [0, ...factor.positions]) {
          expect(Math.abs(information.shared[packed(position, other)])).toBeLessThan(1e-9 * Math.sqrt(own * information.shared[0]));
        }
      }
    }
  });

  it("leave their means to the factor: its coordinates are then its coefficients", () => {
    for (const model of models) {
      const information = withCentredLevels(model, model.information!);
      const { basis, first } = model.terms[0];
      if (basis.kind !== "factor") throw new Error("The first term is the factor.");
      const shown = basis.levels.flatMap((level, k) => (level === basis.reference ? [] : [model.coefficients[first + k]]));
      const [factor] = partsOf(model).places;
      factor.positions.forEach((position, k) => expect(information.coordinates[position]).toBeCloseTo(shown[k], 9));
    }
  });

  it("keep the fitted squares of the whole model, the groups' part too", () => {
    for (const model of models) {
      const before = model.information!;
      const after = withCentredLevels(model, before);
      const squares = (information: typeof before) => {
        let sum = bilinearPacked(information.shared, information.coordinates);
        const { groups } = information;
        for (let line = 0; groups !== null && line < groups.coordinates.length; line++) {
          for (let k = 0; k < information.size; k++) sum += 2 * groups.coordinates[line] * groups.cross[line * information.size + k] * information.coordinates[k];
        }
        return sum;
      };
      expect(relative(squares(after), squares(before))).toBeLessThan(1e-9);
    }
  });

  it("are the only kind that anything is done about", () => {
    for (const name of exampleNames.filter((one) => one !== "a curve per level")) {
      const model = exampleModel(name);
      expect(withCentredLevels(model, model.information!)).toBe(model.information);
    }
  });

  it("leave the model as it was", () => {
    const model = fitModel(models[0].spec, data);
    const kept = structuredClone(model.information);
    withCentredLevels(model, model.information!);
    expect(model.information).toEqual(kept);
  });
});

function bilinearPacked(matrix: Float64Array, vector: Float64Array): number {
  let sum = 0;
  for (let row = 0; row < vector.length; row++) for (let column = 0; column < vector.length; column++) sum += vector[row] * matrix[packed(row, column)] * vector[column];
  return sum;
}
