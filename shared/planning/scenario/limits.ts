import type { Day } from "../../calendar";
import type { FittedModel, FittedTerm } from "../../engine";
import { supportCounts } from "../../engine";
import { driverOfTerm } from "../driver";
import type { Driver } from "../driver";
import type { ModelCell } from "../model-columns";
import type { CellState } from "./plan-cells";
import type { ScenarioFlagCode } from "./scenario";

/** One cell's reason to distrust its prediction, before cells with the same reason are put together. */
export type CellFlag = {
  code: ScenarioFlagCode;
  driver: Driver | null;
  of: "plan" | "base";
  store: string;
  week: Day;
  value: number | string;
};

/** Cells as a model can be asked to predict them, and what had to be said about them. */
export type LimitedCells = { cells: readonly ModelCell[]; flags: CellFlag[] };

/** The limits of one model, ready for any cells in a state. */
export type Limits = (cells: readonly ModelCell[], of: CellState) => LimitedCells;

/** Below this many weeks a value counts as hardly seen. */
const FEWEST_WEEKS_SEEN = 5;

type NumberColumn = "price" | "regularPrice" | "depth" | "temperatureC";
type LevelColumn = "promotion" | "mechanic" | "event";
type Finding = Pick<CellFlag, "code" | "value"> | null;
type TermLimit = {
  driver: Driver;
  find: (cell: ModelCell) => Finding;
  /** The cell itself where its level is known. */
  withKnownLevel?: (cell: ModelCell) => ModelCell;
};

/** The columns a person plans with. Time of year and trend come with the weeks and raise no flag of their own. */
const numberColumns: readonly string[] = ["price", "regularPrice", "depth", "temperatureC"] satisfies NumberColumn[];
const levelColumns: readonly string[] = ["promotion", "mechanic", "event"] satisfies LevelColumn[];

/**
 * The stage between what is planned and what a model is asked: it says where a plan leaves what the store has seen. It flags,
 * and changes one thing only: a level that the store never saw becomes the reference, because no effect is known for it.
 *
 * @returns a function from cells and the state they are in to cells and flags; cells in normal weather are nobody's plan and
 * raise none.
 * @example limitsOf(model)(cells, "plan").flags // [{ code: "outside-range", driver: "price", ... }]
 */
export function limitsOf(model: FittedModel): Limits {
  const limits = model.terms.flatMap((term): TermLimit[] => {
    const [column] = term.columns;
    if (isLevelColumn(column)) return [levelLimit(term, column)];
    return isNumberColumn(column) ? [numberLimit(term, column)] : [];
  });
  return (cells, of) => {
    const flags: CellFlag[] = [];
    if (of !== "normal") {
      for (const { driver, find } of limits) {
        for (const cell of cells) {
          const finding = find(cell);
          if (finding !== null) flags.push({ ...finding, driver, of, store: cell.store, week: cell.week });
        }
      }
    }
    let known = cells;
    for (const { withKnownLevel } of limits) if (withKnownLevel !== undefined) known = known.map(withKnownLevel);
    return { cells: known, flags };
  };
}

function levelLimit(term: FittedTerm, column: LevelColumn): TermLimit {
  const { basis } = term;
  const driver = driverOfTerm(term);
  if (basis.kind !== "factor") return { driver, find: () => null };
  const weeksSeen = remembering((level: string) => supportCounts(term, [level])[0]);
  return {
    driver,
    find: (cell) => {
      const value = cell[column];
      if (value === basis.reference || weeksSeen(value) >= FEWEST_WEEKS_SEEN) return null;
      return { code: weeksSeen(value) === 0 ? "never-seen" : "few-weeks", value };
    },
    withKnownLevel: (cell) => (basis.levels.includes(cell[column]) ? cell : { ...cell, [column]: basis.reference }),
  };
}

function numberLimit(term: FittedTerm, column: NumberColumn): TermLimit {
  const range = term.observedRange ?? [-Infinity, Infinity];
  const weeksSeen = remembering((value: number) => supportCounts(term, Float64Array.of(value))[0]);
  return {
    driver: driverOfTerm(term),
    find: (cell) => {
      const value = column === "depth" ? depthOf(cell) : cell[column];
      if (value === null) return null;
      // A depth is worded as the price that makes it.
      const shown = column === "depth" ? cell.price : value;
      if (value < range[0] || value > range[1]) return { code: "outside-range", value: shown };
      return weeksSeen(value) < FEWEST_WEEKS_SEEN ? { code: "few-weeks", value: shown } : null;
    },
  };
}

function depthOf({ price, regularPrice }: ModelCell): number | null {
  return regularPrice === null ? null : Math.log(price / regularPrice);
}

/**
 * Counting goes through all values seen, and the same few are asked for again and again while a person drags: most often the
 * one asked for last, since a plan tends to have one price.
 */
function remembering<Value>(count: (value: Value) => number): (value: Value) => number {
  const known = new Map<Value, number>();
  let last: { value: Value; answer: number } | null = null;
  return (value) => {
    if (last !== null && last.value === value) return last.answer;
    const answer = known.get(value) ?? count(value);
    known.set(value, answer);
    last = { value, answer };
    return answer;
  };
}

function isLevelColumn(column: string): column is LevelColumn {
  return levelColumns.includes(column);
}

function isNumberColumn(column: string): column is NumberColumn {
  return numberColumns.includes(column);
}
