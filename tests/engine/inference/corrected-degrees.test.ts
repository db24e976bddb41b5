import { modelReport } from "@shared/engine";
import type { FittedModel } from "@shared/engine";
import { arrowRoot, conjugatedPenalty } from "@shared/engine/inference/arrow-root";
import { modelDegrees } from "@shared/engine/inference/corrected-degrees";
import { penaltySlope } from "@shared/engine/inference/penalty-slope";
import { splineBasis } from "@shared/engine/inference/spline-basis";
import { CholeskyDecomposition, inverse, Matrix } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { denseOf, penaltyMatrix } from "./support/dense";
import type { Dense } from "./support/dense";
import { exampleModel, exampleNames, partsOf } from "./support/example-models";

/** The dense basis of all coordinates: the groups' own, then the shared ones as `splineBasis` turns them. */
function turned(model: FittedModel): { dense: Dense; basis: Matrix; parts: ReturnType<typeof partsOf> } {
  const parts = partsOf(model);
  const dense = denseOf(parts.information, parts.posterior);
  const { size } = parts.posterior;
  const basis = Matrix.eye(dense.groupCount + size, dense.groupCount + size);
  basis.setSubMatrix(Matrix.from1DArray(size, size, splineBasis(parts.posterior, parts.places).forwards), dense.groupCount, dense.groupCount);
  return { dense, basis, parts };
}

/** The root of (X'WX + S)^-1 that is the inverse transpose of Cholesky's factor in the basis, at log penalties moved by `moves`. */
function rootAt({ dense, basis }: { dense: Dense; basis: Matrix }, moves: readonly number[]): Matrix {
  const moved = { ...dense, penalties: dense.penalties.map((penalty, j) => penalty.map((value) => value * Math.exp(moves[j] ?? 0))) };
  const system = basis.transpose().mmul(dense.information.clone().add(penaltyMatrix(moved))).mmul(basis);
  const symmetric = system.clone().add(system.transpose()).mul(0.5);
  return basis.mmul(inverse(new CholeskyDecomposition(symmetric).lowerTriangularMatrix).transpose());
}

const names = exampleNames.filter((name) => !["lines and a factor", "a natural spline"].includes(name));

describe.each(names)("Degrees of freedom corrected for chosen penalties: %s", (name) => {
  const model = exampleModel(name);
  const { dense, basis, parts } = turned(model);
  const { posterior, places } = parts;
  const count = posterior.penalties.length;

  it("start from a root of the covariance", () => {
    const root = arrowRoot(posterior, splineBasis(posterior, places))!;
    const plain = rootAt({ dense, basis }, []);
    const from = dense.groupCount;
    const largest = Math.max(...plain.to1DArray().map(Math.abs));
    for (let row = 0; row < posterior.size; row++) {
      for (let column = 0; column < posterior.size; column++) {
        expect(Math.abs(root.shared[row * posterior.size + column] - plain.get(from + row, from + column))).toBeLessThan(1e-6 * largest);
      }
    }
    const first = conjugatedPenalty(posterior, root, posterior.penalties[0]);
    const expected = plain.transpose().mmul(Matrix.diag(dense.penalties[0])).mmul(plain);
    for (let k = 0; k < posterior.size; k++) expect(first.shared[k * (posterior.size + 1)]).toBeCloseTo(expected.get(from + k, from + k), 6);
  });

  it("move the estimates by the derivative of the penalised fit", () => {
    // b = (X'WX + S)^-1 X'Wz, X'Wz = (X'WX + S) b: derivative by central differences of 1e-4 in the log penalty.
    const system = dense.information.clone().add(penaltyMatrix(dense));
    const right = system.mmul(Matrix.columnVector(dense.estimate));
    const at = (j: number, move: number) => {
      const moved = { ...dense, penalties: dense.penalties.map((penalty, k) => (k === j ? penalty.map((value) => value * Math.exp(move)) : penalty)) };
      return inverse(dense.information.clone().add(penaltyMatrix(moved))).mmul(right);
    };
    for (let j = 0; j < count; j++) {
      const difference = at(j, 1e-4).sub(at(j, -1e-4)).mul(1 / 2e-4).to1DArray();
      const slope = penaltySlope(posterior, posterior.penalties[j]);
      const own = [...slope.grouped, ...slope.shared];
      const scale = Math.max(...difference.map(Math.abs), 1e-6);
      own.forEach((value, k) => expect(Math.abs(value - difference[k])).toBeLessThan(2e-4 * scale));
    }
  });

  it("are tr(V' X'WX) with the root's derivatives taken by differences", () => {
    const own = modelDegrees(posterior, places, model.dispersion);
    const step = 1e-4;
    const unit = (j: number, size: number) => Array.from({ length: count }, (_, k) => (k === j ? size : 0));
    const slopes = Array.from({ length: count }, (_, j) => rootAt({ dense, basis }, unit(j, step)).sub(rootAt({ dense, basis }, unit(j, -step))).mul(1 / (2 * step)));
    const moves = posterior.penalties.map((penalty) => { const { grouped, shared } = penaltySlope(posterior, penalty); return Matrix.columnVector([...grouped, ...shared]); });
    const hessian = Matrix.from1DArray(count, count, parts.information.criterionHessian);
    const first = inverse(hessian);
    const second = inverse(hessian.clone().add(Matrix.eye(count, count).mul(0.1)));
    let expected = own.plain;
    for (let j = 0; j < count; j++) {
      for (let k = 0; k < count; k++) {
        expected += (first.get(j, k) * moves[j].transpose().mmul(dense.information).mmul(moves[k]).get(0, 0)) / model.dispersion;
        expected += second.get(j, k) * slopes[j].transpose().mmul(dense.information).mmul(slopes[k]).trace();
      }
    }
    // Every penalty of these models is well inside its bounds, so none is left out.
    if (expected <= own.bound) expect(own.corrected).toBeCloseTo(expected, 3);
    else expect(own.corrected).toBe(own.bound);
    expect(own.isCorrected).toBe(true);
  });

  it("lie between the plain ones and their bound", () => {
    const { plain, corrected, bound } = modelDegrees(posterior, places, model.dispersion);
    expect(plain).toBeCloseTo(model.edf, 6);
    expect(corrected).toBeGreaterThanOrEqual(plain);
    expect(bound).toBeGreaterThanOrEqual(corrected);
  });
});

describe("Without penalties to choose", () => {
  it("nothing is corrected", () => {
    for (const name of ["lines and a factor", "a natural spline"]) {
      const { posterior, places } = partsOf(exampleModel(name));
      const { plain, corrected, bound } = modelDegrees(posterior, places, 1);
      expect([corrected, bound]).toEqual([plain, plain]);
    }
  });

  it("nor are penalties that were given or held to degrees of freedom", () => {
    const terms = exampleModel("curves and a factor").spec.terms;
    const given = exampleModel("curves and a factor", { terms: terms.map((term, k) => ("size" in term ? { ...term, smoothness: k === 0 ? { df: 3 } : { penalty: 2 } } : term)) });
    const { posterior, places } = partsOf(given);
    const { plain, corrected, bound } = modelDegrees(posterior, places, given.dispersion);
    expect(corrected).toBe(plain);
    expect(bound).toBeGreaterThan(plain);
    expect(modelReport(given).aic).toBeCloseTo(2 * (plain + 1 - (given.logLikelihood ?? Number.NaN)), 9);
  });
});

describe("The splines' own basis", () => {
  it.each(exampleNames)("goes there and back: %s", (name) => {
    const { posterior, places } = partsOf(exampleModel(name));
    const { forwards, backwards } = splineBasis(posterior, places);
    const { size } = posterior;
    const back = Matrix.from1DArray(size, size, backwards).mmul(Matrix.from1DArray(size, size, forwards));
    for (let row = 0; row < size; row++) for (let column = 0; column < size; column++) expect(back.get(row, column)).toBeCloseTo(row === column ? 1 : 0, 9);
  });
});
