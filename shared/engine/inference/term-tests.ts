import { choleskyInPlace, forwardSolve } from "../linalg/cholesky";
import { familyRules } from "../family/family";
import type { FittedModel, FittedTerm, ModelInformation, TermTest } from "../types";
import { centredInformation } from "./centred-information";
import { coefficientTest } from "./coefficient-test";
import { block, groupedBlocks, sharedBlocks } from "./group-blocks";
import type { CoordinateBlocks } from "./group-blocks";
import type { Diagonals } from "./penalty-share";
import { isPerfectFit } from "./perfect-fit";
import type { Posterior } from "./posterior";
import { firstDirection } from "./spline-basis";
import { simpleTail, truncatedTest } from "./truncated-test";
import type { TruncatedTest } from "./truncated-test";
import type { TermPlace } from "./term-places";
import { varianceComponentTest } from "./variance-component-test";
import { withoutSpan } from "./without-span";

/** Tests of a term; `reason` says why there is no `test`. */
export type TermTests = { test: TermTest | null; curveTest: TermTest | null; reason: string | null };

/** What every term of one model is tested with. */
export type TestSetting = {
  model: FittedModel;
  information: ModelInformation;
  posterior: Posterior;
  places: readonly TermPlace[];
  /** As `rankDegrees` gives. */
  degrees: Diagonals;
};

/** Eigenvectors of more coefficients than this take longer than a fit. */
const mostCoefficients = 300;
/** The same for coefficients wholly under a penalty, whose blocks are formed over all groups. */
const mostRandom = 150;
/** Degrees of freedom below which a term's penalty has gone to its limit, and nothing of it is left to test. */
const leastDegrees = 1e-6;

const tooMany = (count: number, most: number): TermTests =>
  ({ test: null, curveTest: null, reason: `it has ${count} coefficients, and tests are made of up to ${most}` });

/**
 * Tests that a term is zero: exact Wald for terms under no penalty (F as analysis of variance gives when every other term is
 * in the model, chi-square where the dispersion is known), of truncated rank for curves, of the variance component for terms
 * wholly under a penalty. `curveTest`, where a line is part of a penalised curve: that nothing but the line is needed.
 * Sources: Wood (2013), both papers of Biometrika 100.
 *
 * @example testTerm(setting, setting.places[0]).test?.pValue;
 */
export function testTerm(setting: TestSetting, place: TermPlace): TermTests {
  const { term, positions, unpenalised } = place;
  const none = (reason: string): TermTests => ({ test: null, curveTest: null, reason });
  if (positions.length === 0) return none("other terms reproduce it, and it is left out");
  if (isPerfectFit(setting.model)) return none(nothingToJudgeBy);
  if (place.isGrouped || unpenalised === 0) return { ...testRandom(setting, place), curveTest: null };
  if (positions.length > mostCoefficients) return tooMany(positions.length, mostCoefficients);
  if (unpenalised === positions.length) return settle(setting, wald(setting, place));
  const columns = positions.map((_position, k) => k);
  const hasLine = term.basis.kind !== "tensor-product";
  const test = settle(setting, testFunction(setting, place, { columns, information: centredInformation(setting.information, place) }));
  return hasLine ? { ...test, curveTest: settle(setting, testCurve(setting, place)).test } : test;
}

/** Residual degrees of freedom, or null where the dispersion is known. */
export const residualDegrees = ({ spec, rowCount, edf }: FittedModel): number | null =>
  (familyRules(spec.family).scale === "known" ? null : Math.max(rowCount - edf, 1e-3));

/**
 * Tests of a term in a model without information, as local regression leaves it: of lines and factors by their coefficients.
 *
 * @example testWithoutInformation(model, model.terms[1]).test?.pValue;
 */
export function testWithoutInformation(model: FittedModel, term: FittedTerm): TermTests {
  const none = (reason: string): TermTests => ({ test: null, curveTest: null, reason });
  if (term.kind === "local-regression") return none("local regression is tested by comparing models");
  if (isPerfectFit(model)) return none(nothingToJudgeBy);
  const result = coefficientTest(model, term, residualDegrees(model));
  return result === null ? none("beside local regression only lines and factors are tested") : settle({ model }, result);
}

const nothingToJudgeBy = "the model reproduces the response exactly, which leaves no noise to judge by";

function settle({ model }: Pick<TestSetting, "model">, result: TruncatedTest | null): TermTests {
  if (result === null) return { test: null, curveTest: null, reason: "the covariance of its coefficients is singular" };
  if (!Number.isFinite(result.statistic) || !Number.isFinite(result.pValue)) {
    return { test: null, curveTest: null, reason: "the fit ran off, and its statistic has no finite value" };
  }
  const residual = residualDegrees(model);
  const isExact = familyRules(model.spec.family).fitting === "exact" && model.information !== null
    && model.terms.every(({ penalties }) => penalties.length === 0);
  return {
    test: {
      statistic: residual === null || result.rank === 0 ? result.statistic : result.statistic / result.rank,
      distribution: residual === null ? "chi-square" : "F",
      referenceDegreesOfFreedom: result.rank,
      residualDegreesOfFreedom: residual,
      pValue: result.pValue,
      approximate: !isExact,
    },
    curveTest: null,
    reason: null,
  };
}

/** b' C^-1 b / dispersion. */
function wald({ model, information, posterior }: TestSetting, { positions }: TermPlace): TruncatedTest | null {
  const factor = block(posterior.covariance, posterior.size, positions);
  const count = positions.length;
  if (!choleskyInPlace(factor, count)) return null;
  const solved = Float64Array.from(positions, (position) => information.coordinates[position]);
  forwardSolve(factor, count, solved);
  const statistic = solved.reduce((sum, value) => sum + value * value, 0) / model.dispersion;
  const pValue = Number.isFinite(statistic) ? simpleTail(statistic, count, residualDegrees(model)) : NaN;
  return { statistic, rank: count, pValue };
}

const nothingLeft: TruncatedTest = { statistic: 0, rank: 0, pValue: 1 };

function testFunction(
  { model, information, posterior, degrees }: TestSetting, place: TermPlace, of: { columns: readonly number[]; information: Float64Array },
): TruncatedTest | null {
  const positions = of.columns.map((k) => place.positions[k]);
  const rank = positions.reduce((sum, position) => sum + degrees.shared[position], 0);
  if (rank < leastDegrees) return nothingLeft;
  const towards = firstDirection(place);
  return truncatedTest({
    estimate: Float64Array.from(positions, (position) => information.coordinates[position]),
    covariance: block(posterior.covariance, posterior.size, positions).map((value) => value * model.dispersion),
    information: of.information,
    rank,
    residualDegrees: residualDegrees(model),
    orientation: Float64Array.from(of.columns, (k) => towards[k]),
  });
}

/** The part of a curve that no line (of its own columns, and no constant) reproduces. */
function testCurve(setting: TestSetting, place: TermPlace): TruncatedTest | null {
  const { unpenalised, positions } = place;
  const all = centredInformation(setting.information, place);
  const columns = positions.flatMap((_position, k) => (k < unpenalised ? [] : [k]));
  return testFunction(setting, place, { columns, information: withoutSpan(all, positions.length, unpenalised) });
}

const randomKinds = ["random-effect", "factor-smooth"];

function testRandom(setting: TestSetting, place: TermPlace): TermTests {
  const { model, information, posterior, places, degrees } = setting;
  const { isGrouped, positions } = place;
  const count = isGrouped ? positions.length * (information.groups?.count ?? 0) : positions.length;
  const size = isGrouped ? (information.groups?.count ?? 0) * (information.groups?.size ?? 0) : count;
  if (size > mostRandom) return tooMany(count, mostRandom);
  const of = isGrouped ? degrees.grouped : degrees.shared;
  if (positions.reduce((sum, position) => sum + of[position], 0) < leastDegrees) return settle(setting, nothingLeft);
  const penalty: Diagonals = { shared: posterior.shared.slice(), grouped: posterior.grouped.slice() };
  for (const other of places) {
    if (other === place || !randomKinds.includes(other.term.kind)) continue;
    for (const position of other.positions) (other.isGrouped ? penalty.grouped : penalty.shared)[position] = 0;
  }
  const blocks: CoordinateBlocks = isGrouped ? groupedBlocks(posterior, positions, penalty) : sharedBlocks(posterior, positions, penalty);
  const { groups, coordinates } = information;
  const estimate = isGrouped && groups !== null
    ? Float64Array.from({ length: count }, (_, k) => groups.coordinates[Math.floor(k / positions.length) * groups.size + positions[k % positions.length]])
    : Float64Array.from(positions, (position) => coordinates[position]);
  return settle(setting, varianceComponentTest({ ...blocks, estimate, dispersion: model.dispersion, residualDegrees: residualDegrees(model) }));
}
