import type { ModelSpec, TermSpec } from "../engine";
import { PlanningError } from "./planning-error";
import type { LevelCounts, Variation } from "./variation";

/** A driver that the default specification treats otherwise than usual, and why, in a sentence for people. */
export type DriverNote = { driver: "price" | "season" | "temperature" | "promotion" | "mechanic" | "event"; reason: string };

/** A specification, the drivers it leaves out and those it keeps to a straight line. */
export type DefaultSpec = { spec: ModelSpec; leftOut: DriverNote[]; straightLines: DriverNote[] };

/** Fewer weeks than these are refused, keep to straight lines, or leave the time of year out. */
const FEWEST_WEEKS = 8;
const FEWEST_WEEKS_FOR_CURVES = 26;
const FEWEST_WEEKS_FOR_SEASON = 52;
/** A curve needs four distinct values; between two and three there is a line. */
const FEWEST_VALUES_FOR_A_CURVE = 4;
const CURVE_SIZE = 8;
/** Unpenalised coefficients may be at most this share of the weeks. */
const MOST_COEFFICIENTS_PER_WEEK = 1 / 3;

/**
 * The specification a product in one store is fitted with unless a person chooses another: quasi-Poisson units with smooth
 * curves of log price and temperature (8 splines each), a circle of the year, and levels of promotion, mechanic and event,
 * the reference being "none"; exposure as offset. What never varied is left out, what hardly varied or was seen for
 * less than half a year is a straight line, and each such choice has its reason.
 *
 * @param variation see `describeVariation`.
 * @throws PlanningError "too-few-weeks" below 8 weeks; "nothing-sold" where all units are zero.
 * @example const { spec, leftOut } = defaultSpec(describeVariation(data)); fitModel(spec, data)
 */
export function defaultSpec(variation: Variation): DefaultSpec {
  requireEnough(variation);
  const draft: Draft = { terms: [], leftOut: [], straightLines: [], coefficients: 1, weeks: variation.weeks };
  addCurve(draft, { driver: "price", column: "price", log: true, distinctValues: variation.distinctPrices });
  addLevels(draft, { driver: "promotion", counts: variation.promotion });
  addSeason(draft, variation);
  addCurve(draft, { driver: "temperature", column: "temperatureC", distinctValues: variation.distinctTemperatures });
  addLevels(draft, { driver: "mechanic", counts: variation.mechanic });
  addLevels(draft, { driver: "event", counts: variation.event });
  const spec: ModelSpec = { response: "units", family: "quasi-poisson", offset: "logExposure", terms: draft.terms };
  return { spec, leftOut: draft.leftOut, straightLines: draft.straightLines };
}

const ONE_OF = { promotion: "a promotion", mechanic: "a mechanic", event: "an event" } as const;

type Driver = DriverNote["driver"];
type Draft = { terms: TermSpec[]; leftOut: DriverNote[]; straightLines: DriverNote[]; coefficients: number; weeks: number };

function requireEnough({ weeks, unitsSold }: Variation): void {
  if (weeks < FEWEST_WEEKS) {
    const seen = weeks === 1 ? "1 week" : `${weeks} weeks`;
    throw new PlanningError("too-few-weeks", `${seen} of sales are too few to learn from: at least ${FEWEST_WEEKS} are needed.`);
  }
  if (unitsSold <= 0) throw new PlanningError("nothing-sold", `Nothing was sold in ${weeks} weeks, so there is nothing to learn.`);
}

function addCurve(
  draft: Draft,
  { driver, column, log, distinctValues }: { driver: Driver; column: string; log?: boolean; distinctValues: number | null },
): void {
  if (distinctValues === null) return leaveOut(draft, driver, `The ${driver} of too many weeks is not known.`);
  if (distinctValues < 2) return leaveOut(draft, driver, `The ${driver} never varied.`);
  if (!hasRoomFor(draft, 1)) return leaveOut(draft, driver, tooFewWeeks(draft));
  draft.coefficients += 1;
  const scale = log ? { log } : {};
  if (draft.weeks >= FEWEST_WEEKS_FOR_CURVES && distinctValues >= FEWEST_VALUES_FOR_A_CURVE) {
    draft.terms.push({ kind: "smooth", column, ...scale, size: CURVE_SIZE });
    return;
  }
  draft.terms.push({ kind: "linear", column, ...scale });
  const reason = draft.weeks < FEWEST_WEEKS_FOR_CURVES
    ? `A straight line: ${draft.weeks} weeks are too few for a curve.`
    : `A straight line: only ${distinctValues} values were seen.`;
  draft.straightLines.push({ driver, reason });
}

function addSeason(draft: Draft, { weeks, weeksSpanned }: Variation): void {
  if (weeks < FEWEST_WEEKS_FOR_SEASON || weeksSpanned < FEWEST_WEEKS_FOR_SEASON) {
    return leaveOut(draft, "season", `${Math.min(weeks, weeksSpanned)} weeks do not cover a year.`);
  }
  draft.terms.push({ kind: "cyclic-smooth", column: "yearFraction", period: [0, 1] });
}

function addLevels(draft: Draft, { driver, counts }: { driver: keyof typeof ONE_OF; counts: LevelCounts }): void {
  const levels = Object.keys(counts);
  const others = levels.filter((level) => level !== "none").length;
  if (others === 0) return leaveOut(draft, driver, `There was no week with ${ONE_OF[driver]}.`);
  if (levels.length === others) return leaveOut(draft, driver, `There was no week without ${ONE_OF[driver]} to compare with.`);
  if (!hasRoomFor(draft, others)) return leaveOut(draft, driver, tooFewWeeks(draft));
  draft.coefficients += others;
  draft.terms.push({ kind: "factor", column: driver, reference: "none" });
}

function hasRoomFor(draft: Draft, coefficients: number): boolean {
  return draft.coefficients + coefficients <= MOST_COEFFICIENTS_PER_WEEK * draft.weeks;
}

function tooFewWeeks({ weeks }: Draft): string {
  return `${weeks} weeks are too few to tell its effect from that of the other drivers.`;
}

function leaveOut(draft: Draft, driver: Driver, reason: string): void {
  draft.leftOut.push({ driver, reason });
}
