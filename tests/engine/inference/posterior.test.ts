import { rankDegrees, sharedPenaltyShare } from "@shared/engine/inference/penalty-share";
import { groupedBlocks, sharedBlocks } from "@shared/engine/inference/group-blocks";
import { posteriorOf } from "@shared/engine/inference/posterior";
import { placedPenalties, termPlaces } from "@shared/engine/inference/term-places";
import { inverse } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { denseOf, penaltyMatrix } from "./support/dense";
import { exampleModel, exampleNames, partsOf } from "./support/example-models";

describe.each(exampleNames)("The posterior of a model with %s", (name) => {
  const model = exampleModel(name);
  const { information, posterior, places } = partsOf(model);
  const dense = denseOf(information, posterior);
  const penalty = penaltyMatrix(dense);
  const covariance = inverse(dense.information.clone().add(penalty));
  const share = covariance.mmul(penalty).mmul(covariance);
  const from = dense.groupCount;

  it("is the inverse of information and penalties, written out", () => {
    for (let row = 0; row < posterior.size; row++) {
      for (let column = 0; column < posterior.size; column++) {
        const expected = covariance.get(from + row, from + column);
        const scale = Math.sqrt(covariance.get(from + row, from + row) * covariance.get(from + column, from + column));
        expect(Math.abs(posterior.covariance[row * posterior.size + column] - expected)).toBeLessThan(1e-7 * scale);
      }
    }
  });

  it("has the degrees of freedom of the fit, term by term", () => {
    const taken = covariance.mmul(dense.information);
    for (const { term, positions, isGrouped } of places) {
      const lines = isGrouped
        ? Array.from({ length: from }, (_, line) => line).filter((line) => positions.includes(line % (information.groups?.size ?? 1)))
        : positions.map((position) => from + position);
      expect(lines.reduce((sum, line) => sum + taken.get(line, line), 0), term.id).toBeCloseTo(term.edf, 5);
    }
    expect(taken.trace()).toBeCloseTo(model.edf, 5);
  });

  it("has 2 tr(F) - tr(FF) as written out", () => {
    const taken = covariance.mmul(dense.information);
    const expected = 2 * taken.trace() - taken.mmul(taken).trace();
    const { shared, grouped } = rankDegrees(posterior);
    expect([...shared, ...grouped].reduce((sum, value) => sum + value, 0)).toBeCloseTo(expected, 6);
    expect(shared[0]).toBeCloseTo(1, 8);
  });

  it("has C S C among the shared coordinates as written out", () => {
    const own = sharedPenaltyShare(posterior, posterior);
    const largest = Math.max(...own.map(Math.abs), 1e-12);
    for (let row = 0; row < posterior.size; row++) {
      for (let column = 0; column < posterior.size; column++) {
        expect(Math.abs(own[row * posterior.size + column] - share.get(from + row, from + column))).toBeLessThan(1e-7 * largest);
      }
    }
  });

  it("gives the blocks of a term's coordinates as written out", () => {
    for (const { positions, isGrouped } of places) {
      const width = information.groups?.size ?? 1;
      const lines = isGrouped
        ? Array.from({ length: from / width }, (_, group) => positions.map((k) => group * width + k)).flat()
        : positions.map((position) => from + position);
      const blocks = isGrouped ? groupedBlocks(posterior, positions, posterior) : sharedBlocks(posterior, positions, posterior);
      lines.forEach((row, i) => lines.forEach((column, k) => {
        const scale = Math.sqrt(covariance.get(row, row) * covariance.get(column, column));
        expect(Math.abs(blocks.covariance[i * lines.length + k] - covariance.get(row, column))).toBeLessThan(1e-7 * scale);
        expect(Math.abs(blocks.penaltyShare[i * lines.length + k] - share.get(row, column))).toBeLessThan(1e-7 * scale);
      }));
    }
  });
});

describe("Places of coordinates", () => {
  it("are each term's own, and together all of them but the intercept", () => {
    for (const name of exampleNames) {
      const { information, places } = partsOf(exampleModel(name));
      const shared = places.filter(({ isGrouped }) => !isGrouped).flatMap(({ positions }) => positions);
      expect([0, ...shared].sort((one, other) => one - other), name).toEqual(Array.from({ length: information.size }, (_, k) => k));
      const grouped = places.filter(({ isGrouped }) => isGrouped).flatMap(({ positions }) => positions);
      expect(grouped.sort((one, other) => one - other), name).toEqual(Array.from({ length: information.groups?.size ?? 0 }, (_, k) => k));
    }
  });

  it("leave out what the fit dropped", () => {
    const model = exampleModel("lines and a factor", { terms: [{ kind: "linear", column: "price" }, { kind: "linear", column: "price", id: "again" }] });
    const information = model.information!;
    expect(information.dropped).toEqual([2]);
    expect(termPlaces(model, information).map(({ positions }) => positions)).toEqual([[1], []]);
    const posterior = posteriorOf(model, information)!;
    expect(Array.from(posterior.covariance.subarray(6, 9))).toEqual([0, 0, 0]);
    expect(rankDegrees(posterior).shared[2]).toBe(0);
  });

  it("name penalties in the order of the criterion's second derivatives, and say which were estimated", () => {
    const terms = exampleModel("curves and a factor").spec.terms.map((term) => (term.kind === "cyclic-smooth" ? { ...term, smoothness: { df: 2 } } : term));
    const model = exampleModel("curves and a factor", { terms });
    const penalties = placedPenalties(model);
    expect(penalties.length ** 2).toBe(model.information?.criterionHessian.length);
    expect(penalties.map(({ termId, isEstimated }) => [termId, isEstimated])).toEqual([["price", true], ["week", false]]);
    expect(penalties.map(({ multiplier }) => multiplier)).toEqual(model.terms.flatMap((term) => term.penalties));
  });
});
