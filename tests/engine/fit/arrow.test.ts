import { arrowSystem, createArrowState } from "@shared/engine/fit/arrow-system";
import { sharedCoordinates } from "@shared/engine/fit/coordinates";
import { eliminateUnpenalised } from "@shared/engine/fit/eliminate-unpenalised";
import { createState } from "@shared/engine/fit/likelihood-state";
import type { NormalEquations } from "@shared/engine/fit/normal-equations";
import { layOutPenalties } from "@shared/engine/fit/penalties";
import type { Penalty } from "@shared/engine/fit/penalties";
import type { LikelihoodProblem, Scale } from "@shared/engine/fit/restricted-likelihood";
import { differentiate, evaluateLikelihood } from "@shared/engine/fit/restricted-likelihood";
import { describe, expect, it } from "vitest";
import { seededNormal } from "../support/generator";
import { largestDifference } from "../support/measures";

const own = 3;
const shared = { unpenalised: 2, size: 6 };
const rowCount = 60;

const penalty = (start: number, end: number, grouped: boolean, diagonal: number[] | null = null): Penalty =>
  ({ id: "any", smoothness: "auto", start, end, diagonal: diagonal === null ? null : Float64Array.from(diagonal), grouped });

/** Two penalties that share coordinates, and two of the groups. */
const penalties = [penalty(0, 4, false, [1, 1, 0, 2]), penalty(1, 4, false, [0, 1, 0.5]), penalty(0, 1, true), penalty(1, 3, true)];
const logPenalties = Float64Array.of(0.7, -0.4, 1.1, -1.3);

/** Rows of shared columns, then of every group's own columns, which are zero outside the group; and their products. */
function productsOf(groups: number) {
  const normal = seededNormal(11);
  const width = shared.size + groups * own;
  const rows = Array.from({ length: rowCount }, (_, row) => {
    const values = new Float64Array(width);
    for (let k = 0; k < shared.size; k++) values[k] = k === 0 ? 1 : normal();
    for (let k = 0; k < own; k++) values[shared.size + (row % groups) * own + k] = normal();
    return { values, response: normal() };
  });
  return {
    entry: (i: number, j: number) => rows.reduce((sum, { values }) => sum + values[i] * values[j], 0),
    right: (i: number) => rows.reduce((sum, { values, response }) => sum + values[i] * response, 0),
    total: rows.reduce((sum, { response }) => sum + response ** 2, 0),
    ownColumn: (group: number, k: number) => shared.size + group * own + k,
  };
}

function asGroups(groups: number): NormalEquations {
  const { entry, right, total, ownColumn } = productsOf(groups);
  const matrix = Float64Array.from({ length: shared.size ** 2 }, (_, at) => entry(Math.floor(at / shared.size), at % shared.size));
  const each = (count: number, value: (group: number, k: number, at: number) => number) =>
    Float64Array.from({ length: groups * own * count }, (_, at) => value(Math.floor(at / (own * count)), Math.floor(at / count) % own, at % count));
  return {
    matrix, total, shift: 0,
    vector: Float64Array.from({ length: shared.size }, (_, k) => right(k)),
    groups: {
      count: groups, size: own,
      own: each(own, (group, k, m) => entry(ownColumn(group, k), ownColumn(group, m))),
      cross: each(shared.size, (group, k, column) => entry(ownColumn(group, k), column)),
      vector: each(1, (group, k) => right(ownColumn(group, k))),
    },
  };
}

/** The same problem with the groups' coordinates among the shared ones. */
function asOneMatrix(groups: number): { equations: NormalEquations; penalties: Penalty[] } {
  const { entry, right, total } = productsOf(groups);
  const size = shared.size + groups * own;
  const repeated = (chosen: number[]) => Array.from({ length: groups * own }, (_, at) => Number(chosen.includes(at % own)));
  return {
    equations: {
      total, shift: 0, groups: null,
      matrix: Float64Array.from({ length: size ** 2 }, (_, at) => entry(Math.floor(at / size), at % size)),
      vector: Float64Array.from({ length: size }, (_, k) => right(k)),
    },
    penalties: [
      penalties[0], penalties[1],
      penalty(4, 4 + groups * own, false, repeated([0])), penalty(4, 4 + groups * own, false, repeated([1, 2])),
    ],
  };
}

function arrowProblem(groups: number, scale: Scale) {
  const equations = asGroups(groups);
  const system = arrowSystem(equations, equations.groups!, { ...shared, rowCount }, null);
  const problem: LikelihoodProblem = { system, layout: layOutPenalties(penalties, groups), scale };
  const state = createState({ size: system.size, penalties: 4, arrow: createArrowState(system.groups, system.size) });
  return { problem, state };
}

function denseProblem(groups: number, scale: Scale) {
  const { equations, penalties: all } = asOneMatrix(groups);
  const system = eliminateUnpenalised(equations, { unpenalised: 2, size: shared.size + groups * own, rowCount }, null);
  const problem: LikelihoodProblem = { system, layout: layOutPenalties(all, 1), scale };
  return { problem, state: createState({ size: system.size, penalties: 4, arrow: null }) };
}

/** With three groups, squares between groups are summed directly; with five, by sums over the shared coordinates. */
const cases: [number, Scale][] = [[3, "unknown"], [5, "unknown"], [3, "known"], [5, "known"]];

describe.each(cases)("The restricted likelihood of %d groups eliminated one by one, %s scale,", (groups, scale) => {
  const arrow = arrowProblem(groups, scale);
  const dense = denseProblem(groups, scale);
  for (const { problem, state } of [arrow, dense]) {
    evaluateLikelihood(problem, logPenalties, state);
    differentiate(problem, state, "hessian");
  }

  // Both are exact: what differs is rounding.
  it("is that of the whole matrix, with its derivatives", () => {
    expect(arrow.state.criterion).toBeCloseTo(dense.state.criterion, 10);
    for (const name of ["gradient", "hessian", "determinantHessian", "edf"] as const) {
      expect(largestDifference(arrow.state[name], dense.state[name])).toBeLessThan(1e-10);
    }
  });

  it("has its estimates, of shared coordinates and of every group", () => {
    const whole = sharedCoordinates(dense.problem.system, dense.state);
    expect(largestDifference(sharedCoordinates(arrow.problem.system, arrow.state), whole.slice(0, shared.size))).toBeLessThan(1e-11);
    expect(largestDifference(arrow.state.arrow!.coefficients, whole.slice(shared.size))).toBeLessThan(1e-11);
  });

  it("has the derivatives that differences of its values show", () => {
    const { problem } = arrow;
    const { state } = arrowProblem(groups, scale);
    const step = 1e-4;
    const at = (j: number, by: number) => {
      evaluateLikelihood(problem, logPenalties.map((value, k) => value + (k === j ? by : 0)), state);
      differentiate(problem, state, "gradient");
      return { criterion: state.criterion, gradient: state.gradient.slice() };
    };
    for (let j = 0; j < 4; j++) {
      const [up, down] = [at(j, step), at(j, -step)];
      expect((up.criterion - down.criterion) / (2 * step)).toBeCloseTo(arrow.state.gradient[j], 6);
      for (let k = 0; k < 4; k++) expect((up.gradient[k] - down.gradient[k]) / (2 * step)).toBeCloseTo(arrow.state.hessian[j * 4 + k], 6);
    }
  });
});
