import { columnsOf, learnBasis, termId } from "../basis/term-basis";
import { addTransposeTimes, paddedWidth } from "../linalg/sparse-rows";
import type { SparseRows } from "../linalg/sparse-rows";
import { termCoordinates } from "../penalty/term-transform";
import type { TermCoordinates } from "../penalty/term-transform";
import type { ModelData, ModelWarning, SeenValues, TermBasis, TermSpec } from "../types";
import type { Penalty } from "./penalties";

/** A term (or the intercept) with its rows and where its coordinates and coefficients stand in the model. */
export type DesignTerm = {
  id: string;
  rows: SparseRows;
  coordinates: TermCoordinates;
  /** First of its unpenalised and of its penalised coordinates among the shared; 0 for an eliminated group's. */
  unpenalisedFirst: number;
  penalisedFirst: number;
  /** First of its coordinates within each group's block, or null for a shared term. */
  groupFirst: number | null;
  /** Per column that its transform gives, the shared coordinate (or the one within the group's block). */
  positions: Int32Array;
  /** First of its coefficients. */
  rawFirst: number;
};

export type LearntTerm = {
  spec: TermSpec;
  design: DesignTerm;
  basis: TermBasis;
  seen: SeenValues;
  observedRange: [number, number] | null;
};

/** The groups that are eliminated one by one: `count` of them with `size` coordinates each. */
export type DesignGroups = { count: number; size: number; parts: DesignTerm[] };

/** Everything about the rows that stays the same while weights and penalties change. */
export type Design = {
  rowCount: number;
  /** The intercept first, then the shared terms in the order of the spec. */
  parts: DesignTerm[];
  groups: DesignGroups | null;
  terms: LearntTerm[];
  penalties: Penalty[];
  /** Shared coordinates: the unpenalised come first, `unpenalised` of `size`. */
  unpenalised: number;
  size: number;
  /** Coefficients of the shared terms, which come first, and of all. */
  sharedRawSize: number;
  rawSize: number;
  widest: number;
  warnings: ModelWarning[];
};

const interceptCoordinates: TermCoordinates = {
  transform: { form: "scaled", factor: 1 }, rawWidth: 1, unpenalised: 1, penalised: 0, penalties: [], grouped: false,
};

type Learnt = {
  spec: TermSpec; basis: TermBasis; rows: SparseRows; seen: SeenValues; observedRange: [number, number] | null;
  coordinates: TermCoordinates; eliminated: boolean;
};

/**
 * Learns every term from the rows, and lays out coordinates (unpenalised before penalised, groups apart) and coefficients.
 *
 * @param data columns of the rows fitted to, `rowCount` each.
 * @throws EngineError as the term kinds do.
 * @example buildDesign(spec.terms, data, 110).penalties.length; // penalties to choose
 */
export function buildDesign(termSpecs: readonly TermSpec[], data: ModelData, rowCount: number): Design {
  const ones = new Float64Array(rowCount).fill(1);
  const warnings: ModelWarning[] = [];
  const learnt = termSpecs.map((spec): Learnt => {
    const result = learnBasis(spec, data);
    warnings.push(...result.warnings);
    if ("centring" in result.basis && result.basis.kind !== "levelled-smooth" && result.basis.kind !== "local-regression") {
      centreOver(result.basis.centring, result.rows, ones);
    }
    // Named one by one: spreading objects costs more than all the rest of the layout.
    const { basis, rows, seen, observedRange } = result;
    return { spec, basis, rows, seen, observedRange, coordinates: termCoordinates(basis), eliminated: false };
  });
  const group = largestGroup(learnt);
  for (const term of learnt) term.eliminated = term.coordinates.grouped && groupColumn(term.spec) === group;
  return layOut(learnt, { rowCount, warnings, intercept: { storage: "single", width: 1, values: ones } });
}

/** The mean of each column over the rows, which centres the curve. */
function centreOver(centring: Float64Array, rows: SparseRows, ones: Float64Array): void {
  addTransposeTimes(rows, ones, centring, 0);
  for (let k = 0; k < centring.length; k++) centring[k] /= ones.length;
}

/** Column whose levels a grouped term has. */
function groupColumn(spec: TermSpec): string {
  return spec.kind === "factor-smooth" ? spec.group : columnsOf(spec)[0];
}

/** Of several grouping columns the one with most coordinates is eliminated; the others' are shared coordinates. */
function largestGroup(learnt: readonly Learnt[]): string | null {
  const sizes = new Map<string, number>();
  for (const { spec, coordinates } of learnt) {
    if (coordinates.grouped) sizes.set(groupColumn(spec), (sizes.get(groupColumn(spec)) ?? 0) + coordinates.penalised);
  }
  return [...sizes].reduce<[string | null, number]>((best, [name, size]) => (size > best[1] ? [name, size] : best), [null, 0])[0];
}

type Next = { unpenalised: number; penalised: number; group: number; raw: number };

function layOut(learnt: readonly Learnt[], of: { rowCount: number; warnings: ModelWarning[]; intercept: SparseRows }): Design {
  const { rowCount, warnings, intercept } = of;
  const shared = learnt.filter((term) => !term.eliminated);
  const unpenalised = shared.reduce((sum, { coordinates }) => sum + coordinates.unpenalised, 1);
  const next: Next = { unpenalised: 0, penalised: unpenalised, group: 0, raw: 0 };
  const parts = [place({ id: "intercept", rows: intercept, coordinates: interceptCoordinates }, next)];
  const placed = new Map<Learnt, DesignTerm>();
  for (const term of shared) {
    const part = place({ id: termId(term.spec), rows: term.rows, coordinates: term.coordinates }, next);
    parts.push(part);
    placed.set(term, part);
  }
  const sharedRawSize = next.raw;
  const groupParts: DesignTerm[] = [];
  for (const term of learnt) {
    if (!term.eliminated) continue;
    const part = placeInGroup({ id: termId(term.spec), rows: term.rows, coordinates: term.coordinates }, next);
    groupParts.push(part);
    placed.set(term, part);
  }
  const terms = learnt.map((term): LearntTerm => ({
    spec: term.spec, basis: term.basis, seen: term.seen, observedRange: term.observedRange, design: placed.get(term) as DesignTerm,
  }));
  return {
    rowCount, warnings, parts, terms, unpenalised, sharedRawSize,
    groups: groupParts.length === 0 ? null : { count: groupCountOf(groupParts[0]), size: next.group, parts: groupParts },
    penalties: terms.flatMap((term) => penaltiesOf(term, unpenalised)),
    size: next.penalised,
    rawSize: next.raw,
    widest: Math.max(...parts.map((part) => paddedWidth(part.rows))),
  };
}

const groupCountOf = ({ coordinates }: DesignTerm): number => (coordinates.transform.form === "blocks" ? coordinates.transform.count : 1);

function place(term: Pick<DesignTerm, "id" | "rows" | "coordinates">, next: Next): DesignTerm {
  const { id, rows, coordinates } = term;
  const unpenalisedFirst = next.unpenalised;
  const penalisedFirst = next.penalised;
  const rawFirst = next.raw;
  next.unpenalised += coordinates.unpenalised;
  next.penalised += coordinates.penalised;
  next.raw += coordinates.rawWidth;
  const positions = positionsOf(coordinates, { unpenalisedFirst, penalisedFirst });
  return { id, rows, coordinates, unpenalisedFirst, penalisedFirst, groupFirst: null, positions, rawFirst };
}

function placeInGroup(term: Pick<DesignTerm, "id" | "rows" | "coordinates">, next: Next): DesignTerm {
  const { id, rows, coordinates } = term;
  const { transform, rawWidth } = coordinates;
  const own = transform.form === "blocks" ? transform.columns : 1;
  const groupFirst = next.group;
  const rawFirst = next.raw;
  next.group += own;
  next.raw += rawWidth;
  const positions = Int32Array.from({ length: own }, (_, k) => groupFirst + k);
  return { id, rows, coordinates, unpenalisedFirst: 0, penalisedFirst: 0, groupFirst, positions, rawFirst };
}

function positionsOf(coordinates: TermCoordinates, at: { unpenalisedFirst: number; penalisedFirst: number }): Int32Array {
  const { transform, unpenalised, penalised } = coordinates;
  const positions = new Int32Array(unpenalised + penalised);
  const blocks = transform.form === "blocks" ? transform : { columns: positions.length, count: 1, unpenalised };
  let nextUnpenalised = at.unpenalisedFirst;
  let nextPenalised = at.penalisedFirst;
  let column = 0;
  for (let level = 0; level < blocks.count; level++) {
    for (let own = 0; own < blocks.columns; own++) positions[column++] = own < blocks.unpenalised ? nextUnpenalised++ : nextPenalised++;
  }
  return positions;
}

function penaltiesOf(term: LearntTerm, unpenalised: number): Penalty[] {
  const { coordinates, penalisedFirst, groupFirst, id } = term.design;
  const smoothness = ("smoothness" in term.spec ? term.spec.smoothness : undefined) ?? "auto";
  const isEliminated = groupFirst !== null;
  return coordinates.penalties.map(({ start, end, diagonal }): Penalty => {
    if (isEliminated) return { id, smoothness, start: groupFirst + start, end: groupFirst + end, diagonal, grouped: true };
    const first = penalisedFirst - unpenalised;
    if (!coordinates.grouped) return { id, smoothness, start: first + start, end: first + end, diagonal, grouped: false };
    const each = coordinates.transform.form === "blocks" ? coordinates.transform.columns : 1;
    const repeated = Float64Array.from({ length: coordinates.penalised }, (_, k) => {
      const own = k % each;
      return own < start || own >= end ? 0 : (diagonal?.[own - start] ?? 1);
    });
    return { id, smoothness, start: first, end: first + coordinates.penalised, diagonal: repeated.every((weight) => weight === 1) ? null : repeated, grouped: false };
  });
}
