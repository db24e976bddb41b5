import { fireEvent, screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { describe, expect, it, vi } from "vitest";
import { weeksBetween } from "@shared/calendar";
import { countStates, coverageRows, stretchesOf } from "@/components/charts/coverage-map/coverage-data";
import type { CellState, CoverageStore } from "@/components/charts/coverage-map/coverage-data";
import { calendarMarks, moveCell, quarterOf, rowPaths, shareWidth } from "@/components/charts/coverage-map/coverage-layout";
import { CoverageMap } from "@/components/charts/coverage-map/coverage-map";
import { coverageTable } from "@/components/charts/coverage-map/coverage-table";
import { coverageSentence, needsALook } from "@/features/extracts/view/coverage-sentence";
import { createChainFormat, neutralSettings } from "@/lib/format/chain-format";
import { renderInPage } from "./support/render";

const weeks = weeksBetween("2026-05-11", "2026-06-01");
const store = (name: string, region: string, states: CellState[]): CoverageStore => ({
  code: name.slice(0, 3), name, region, states,
  rows: states.map((state) => (state === "missing" || state === "withdrawn" || state === "closed" ? 0 : 18)),
  files: states.map((state) => (state === "missing" || state === "closed" ? null : 0)),
});
const stores = [
  store("Ashgill", "Town", ["there", "there", "missing", "missing"]),
  store("Nunhaven", "Coast", ["closed", "there", "thin", "restated"]),
  store("Cawl Bay", "Coast", ["there", "there", "there", "withdrawn"]),
];

describe("the coverage picture's data", () => {
  it("puts stores under their regions, both by name", () => {
    expect(coverageRows(stores).map((row) => (row.kind === "region" ? `${row.name} ${row.stores}` : row.store.name))).toEqual([
      "Coast 2", "Cawl Bay", "Nunhaven", "Town 1", "Ashgill",
    ]);
  });

  it("counts store-weeks by state, and joins weeks of one state", () => {
    expect(countStates(stores)).toEqual({ there: 6, thin: 1, restated: 1, withdrawn: 1, missing: 2, closed: 1 });
    expect(stretchesOf(stores[0])).toEqual([{ state: "there", first: 0, last: 1, rows: 36 }, { state: "missing", first: 2, last: 3, rows: 0 }]);
  });

  it("is a table of stretches, with the days of their weeks", () => {
    const { rows } = coverageTable(stores, weeks);
    expect(rows).toHaveLength(8);
    expect(rows.at(-1)).toEqual(["Ash", "Ashgill", "Town", "missing", "2026-05-25", "2026-06-01", 2, 0]);
  });

  it("is said in a line, and picks the stores that need a look", () => {
    const format = createChainFormat(neutralSettings);
    const coverage = { weeks, stores: stores.map((one) => ({ ...one, states: [...one.states], rows: [...one.rows], files: [...one.files] })) };
    expect(coverageSentence(coverage, format)).toBe("3 stores in 4 weeks: 11 store-weeks, of which 2 missing, 1 thin, 1 withdrawn.");
    const whole = { ...coverage, stores: [{ ...coverage.stores[0], states: ["there", "there", "there", "restated"] as CellState[] }] };
    expect(coverageSentence(whole, format)).toBe("1 store in 4 weeks: 4 store-weeks, and all are there.");
    expect(whole.stores.some(needsALook)).toBe(false);
    expect(coverage.stores.every(needsALook)).toBe(true);
  });
});

describe("the coverage picture's geometry", () => {
  it("shares the width among the weeks, never below what a finger or pointer can hit, and gives the names what is left", () => {
    expect(shareWidth({ weeks: 52, width: 1300 })).toEqual({ cell: 22, namesWidth: 156 });
    expect(shareWidth({ weeks: 52, width: 1320 })).toEqual({ cell: 22, namesWidth: 176 });
    expect(shareWidth({ weeks: 156, width: 1300 })).toEqual({ cell: 13, namesWidth: 156 });
    expect(shareWidth({ weeks: 26, width: 340 })).toEqual({ cell: 13, namesWidth: 104 });
  });

  it("draws a mark of its own for each state, all weeks of one in one stroke", () => {
    const size = { width: 20, height: 22 };
    const marks = new Map(rowPaths(["there", "thin", "restated", "withdrawn", "missing", "there"], size));
    expect(marks.get("there")?.ground).toBe("M1 3H19V19H1ZM101 3H119V19H101Z");
    expect(marks.get("withdrawn")?.ground).toBe("");
    const shapes = ["thin", "restated", "missing"].map((state) => marks.get(state as CellState)?.ground);
    expect(new Set(shapes).size).toBe(3);
    expect(marks.get("missing")?.line).not.toBe("");
  });

  it("marks years and quarters by the chain's calendar; the 53rd week belongs to the last quarter", () => {
    expect([1, 13, 14, 40, 53].map((week) => quarterOf({ week, year: 2026 }))).toEqual([1, 1, 2, 4, 4]);
    const numbers = [52, 53, 1, 2].map((week, at) => ({ week, year: at < 2 ? 2026 : 2027 }));
    expect(calendarMarks(numbers)).toEqual([{ week: 0, label: "Q4", isYear: true }, { week: 2, label: "Q1", isYear: true }]);
  });

  it("steps over regions' headings and holds at the ends", () => {
    const rows = coverageRows(stores);
    const move = (row: number, week: number, key: string) => moveCell({ row, week }, key, { rows, weeks: 4 });
    expect(move(2, 1, "ArrowDown")).toEqual({ row: 4, week: 1 });
    expect(move(4, 1, "ArrowDown")).toEqual({ row: 4, week: 1 });
    expect(move(1, 3, "ArrowRight")).toEqual({ row: 1, week: 3 });
    expect(move(4, 2, "Home")).toEqual({ row: 4, week: 0 });
    expect(move(4, 2, "PageUp")).toEqual({ row: 1, week: 2 });
    expect(move(4, 2, "a")).toBeNull();
  });
});

describe("the coverage picture", () => {
  const show = () => {
    const onOpenFile = vi.fn();
    renderInPage(<CoverageMap title="Three stores" weeks={weeks} stores={stores} files={["may.csv"]} onOpenFile={onOpenFile} />);
    return { onOpenFile, grid: screen.getByRole("grid") };
  };

  it("is walked by the keyboard, each cell saying what it is, and Enter opens the file", async () => {
    const { onOpenFile, grid } = show();
    grid.focus();
    await userEvent.keyboard("{ArrowLeft}");
    expect(screen.getByRole("gridcell").getAttribute("aria-label")).toBe(
      "Cawl Bay, week 23, 2026 (1\u20137 June 2026): withdrawn, was may.csv",
    );
    expect(grid.getAttribute("aria-activedescendant")).toBe(screen.getByRole("gridcell").id);
    await userEvent.keyboard("{ArrowLeft}");
    expect(screen.getByRole("gridcell").getAttribute("aria-label")).toBe(
      "Cawl Bay, week 22, 2026 (25\u201331 May 2026): there, 18 rows, from may.csv",
    );
    await userEvent.keyboard("{Enter}");
    expect(onOpenFile).toHaveBeenCalledWith(0);
    await userEvent.keyboard("{ArrowDown}{ArrowDown}{Enter}");
    expect(screen.getByRole("gridcell").getAttribute("aria-label")).toMatch(/^Ashgill, .*: missing$/);
    expect(onOpenFile).toHaveBeenCalledTimes(1);
    await userEvent.keyboard("{Escape}");
    expect(screen.queryByRole("gridcell")).toBeNull();
  });

  it("says in its legend what each mark means and how many there are", () => {
    show();
    expect(screen.getAllByRole("listitem").map((item) => item.textContent)).toContain("missing 2 \u00b7 the store was open, nothing is loaded");
  });

  it("gives its numbers by one key", () => {
    const { grid } = show();
    fireEvent.keyDown(grid, { key: "t" });
    expect(screen.getByRole("region", { name: "Numbers of: Three stores" }).textContent).toContain("withdrawn");
  });
});
