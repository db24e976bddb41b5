import { describe, expect, it } from "vitest";
import type { CatalogueEvent } from "@shared/contract/catalogue-events";
import type { CatalogueChange } from "@shared/contract/catalogue-history";
import type { TemperatureWeek } from "@shared/contract/catalogue-temperatures";
import { changeDetails, changeSentence, manySentence } from "@/features/catalogue/view/change-words";
import { columnsOfRows, weekRows } from "@/features/catalogue/view/event-bars";
import { saveProblem } from "@/features/catalogue/view/save-problem";
import { groupChanges } from "@/features/catalogue/view/group-changes";
import { holdsWords } from "@/features/catalogue/view/search";
import { stepPath } from "@/features/catalogue/view/step-path";
import { differenceOf, extentOf, runsOf } from "@/features/catalogue/view/temperature-lines";
import { weeksOfYear, yearOfDay } from "@/features/catalogue/view/year-weeks";
import { ApiError } from "@/lib/api-error";
import { createChainFormat, neutralSettings } from "@/lib/format/chain-format";

const format = createChainFormat(neutralSettings);
const iso = { kind: "iso", weekStart: 1 } as const;
const retail = { kind: "4-5-4", weekStart: 0 } as const;

describe("a year's weeks", () => {
  it("are 52 or 53, by the chain's calendar", () => {
    expect([2025, 2026, 2027].map((year) => weeksOfYear(iso, year).length)).toEqual([52, 53, 52]);
    expect([2022, 2023, 2024].map((year) => weeksOfYear(retail, year).length)).toEqual([52, 53, 52]);
  });

  it("follow one another across the years, without a gap and without a week twice", () => {
    for (const calendar of [iso, retail, { kind: "iso", weekStart: 4 } as const]) {
      const weeks = [2022, 2023, 2024, 2025, 2026, 2027].flatMap((year) => weeksOfYear(calendar, year));
      expect(new Set(weeks.slice(1).map((week, index) => (Date.parse(week) - Date.parse(weeks[index])) / 86_400_000))).toEqual(new Set([7]));
      expect(weeks.map((week) => yearOfDay(calendar, week))).toEqual([2022, 2023, 2024, 2025, 2026, 2027].flatMap((year) => weeksOfYear(calendar, year).map(() => year)));
    }
  });

  it("begin where the calendar says: ISO week 1 holds 4 January, the 4-5-4 year begins after the Saturday nearest 31 January", () => {
    expect(weeksOfYear(iso, 2026)[0]).toBe("2025-12-29");
    expect(weeksOfYear(retail, 2024)[0]).toBe("2024-02-04");
    expect(yearOfDay(iso, "2027-01-03")).toBe(2026);
    expect(yearOfDay(retail, "2024-02-03")).toBe(2023);
  });
});

const event = (part: Partial<CatalogueEvent>): CatalogueEvent => ({ id: 1, code: "fair", name: "Fair", firstDay: "2026-06-08", lastDay: "2026-06-14", region: null, version: "v", ...part });

describe("events over weeks", () => {
  const weeks = weeksOfYear(iso, 2026);

  it("lie over the days they last, to the day", () => {
    const rows = weekRows({ weeks, events: [event({ firstDay: "2025-12-31", lastDay: "2026-01-01" })], weeksInRow: 13 });
    const [bar] = rows[0].bars;
    expect([bar.left, bar.width, bar.room]).toEqual([2 / 91, 2 / 91, 1 - 2 / 91]);
    expect([bar.continuesBefore, bar.continuesAfter]).toEqual([false, false]);
  });

  it("go on in the next row where they pass its end", () => {
    const rows = weekRows({ weeks, events: [event({ firstDay: "2026-03-28", lastDay: "2026-04-02" })], weeksInRow: 13 });
    expect(rows.map(({ bars }) => bars.length)).toEqual([1, 1, 0, 0]);
    expect(rows[0].bars[0]).toMatchObject({ continuesBefore: false, continuesAfter: true });
    expect(rows[1].bars[0]).toMatchObject({ left: 0, continuesBefore: true, continuesAfter: false });
    expect(rows[0].bars[0].width + rows[1].bars[0].width).toBeCloseTo(6 / 91, 12);
  });

  it("that share days lie in lanes of their own, and take a free one again", () => {
    const events = [event({ id: 1 }), event({ id: 2, firstDay: "2026-06-14", lastDay: "2026-06-20" }), event({ id: 3, firstDay: "2026-06-15" , lastDay: "2026-06-16" })];
    const row = weekRows({ weeks, events, weeksInRow: 13 })[1];
    expect(row.bars.map(({ event: { id }, lane }) => [id, lane])).toEqual([[1, 0], [2, 1], [3, 0]]);
    expect(row.lanes).toBe(2);
    // A name has room to the next bar of its lane, or to the row's end.
    expect(row.bars.map(({ room }) => Math.round(room * 91))).toEqual([7, 15, 14]);
  });

  it("have the 53rd week in the fourth row, and as few rows as hold all weeks", () => {
    expect(weekRows({ weeks, events: [], weeksInRow: 13 }).map((row) => row.weeks.length)).toEqual([13, 13, 13, 14]);
    expect(columnsOfRows(weekRows({ weeks, events: [], weeksInRow: 13 }))).toBe(14);
    for (const weeksInRow of [4, 7, 13]) {
      for (const year of [2025, 2026]) {
        const own = weeksOfYear(iso, year);
        const rows = weekRows({ weeks: own, events: [], weeksInRow });
        expect(rows.flatMap((row) => row.weeks)).toEqual(own);
      }
    }
  });
});

const change = (part: Partial<CatalogueChange>): CatalogueChange => ({
  id: 1, at: "2026-06-15T09:00:00.000Z", person: null, byToken: false, file: null, what: "store", change: "changed", code: "S1", before: null, after: null, ...part,
});

describe("a change in words", () => {
  it("says what was done to which, and what became of each field that changed", () => {
    const terms = change({
      what: "terms", before: { validFrom: "2026-06-01", unitCost: 0.8, regularPrice: 1.79, taxRate: 0.21 },
      after: { validFrom: "2026-06-01", unitCost: 0.8765, regularPrice: 1.79, taxRate: 0.055 },
    });
    expect(changeSentence(terms, format)).toBe("changed the terms from 1 June 2026");
    expect(changeDetails(terms, format)).toEqual(["cost: €0.80 → €0.8765", `tax: ${format.percent(0.21)} → ${format.percent(0.055, { digits: 1 })}`]);
  });

  it("says of a new row what it has, and leaves out what it has not", () => {
    const listing = change({ what: "listing", change: "added", after: { store: "S1", firstDay: "2026-01-05", lastDay: null } });
    expect(changeSentence(listing, format)).toBe("entered the listing in S1 from 5 January 2026");
    expect(changeDetails(listing, format)).toEqual([]);
    const product = change({ what: "product", change: "added", after: { name: "Bar", gtin: null, soldByWeight: true, category: "snacks" } });
    expect(changeDetails(product, format)).toEqual(["name: Bar", "sold by weight: yes", "category: snacks"]);
  });

  it("says of a removed one what it had, and of terms without a day that they held from the beginning", () => {
    const removed = change({ what: "terms", change: "removed", before: { validFrom: "1970-01-01", unitCost: null, regularPrice: 2, taxRate: 0 } });
    expect(changeSentence(removed, format)).toBe("removed the terms from the beginning");
    expect(changeDetails(removed, format)[0]).toBe("regular price: €2.00");
  });

  it("names days and places that an event was moved from and to", () => {
    const moved = change({ what: "event", before: { name: "Fair", firstDay: "2026-06-05", lastDay: "2026-06-07", region: null }, after: { name: "Fair", firstDay: "2026-06-12", lastDay: "2026-06-14", region: "coast" } });
    expect(changeDetails(moved, format)).toEqual(["first day: 5 June 2026 → 12 June 2026", "last day: 7 June 2026 → 14 June 2026", "region: nothing → coast"]);
  });
});

describe("changes that came at once", () => {
  const of = (file: string, count: number) => Array.from({ length: count }, (_, id) => change({ id, what: "listing", change: "added", file: { id: file, name: file } }));

  it("are told together from four on, in their order", () => {
    const groups = groupChanges([...of("a", 5), ...of("b", 3), change({ id: 99 })]);
    expect(groups.map((group) => group.length)).toEqual([5, 1, 1, 1, 1]);
    expect(manySentence(groups[0][0], 5)).toBe("entered 5 listings");
  });
});

describe("a refused change", () => {
  const refused = (status: number, errors: { path: string; message: string }[]) => new ApiError({ status, code: "refused", detail: "A sentence.", errors });

  it("stands at the fields that it names, a list's at the list", () => {
    expect(saveProblem(refused(422, [{ path: "stores.3", message: "Not there." }, { path: "firstDay", message: "Taken." }]), ["stores", "firstDay"])).toEqual({
      atFields: [{ field: "stores", message: "Not there." }, { field: "firstDay", message: "Taken." }], sentence: null, isOutdated: false,
    });
  });

  it("is a sentence where it names none that the form has, and says that someone was quicker", () => {
    expect(saveProblem(refused(422, [{ path: "other", message: "x" }]), ["name"]).sentence).toBe("A sentence.");
    expect(saveProblem(refused(412, []), ["name"])).toEqual({ atFields: [], sentence: "A sentence.", isOutdated: true });
    expect(saveProblem(new Error("broken"), ["name"]).sentence).toBe("It was not saved. Try again.");
  });
});

describe("a line in steps", () => {
  const axes = { x: (place: number) => place * 10, y: (value: number) => 100 - value };

  it("keeps each value until the next, and the last to the end", () => {
    expect(stepPath([{ x: 0, value: 5 }, { x: 2, value: 8 }], axes, 4)).toBe("M0.00 95.00L20.00 95.00L20.00 92.00L40.00 92.00");
  });

  it("breaks where nothing is known", () => {
    expect(stepPath([{ x: 0, value: 5 }, { x: 1, value: null }, { x: 2, value: 8 }], axes, 3)).toBe("M0.00 95.00L10.00 95.00M20.00 92.00L30.00 92.00");
  });
});

describe("a year of temperatures", () => {
  const week = (temperatureC: number | null, normalC: number | null = null): TemperatureWeek => ({ week: "2026-06-08", temperatureC, normalC, lowC: null, highC: null, source: null, version: null });

  it("is drawn in runs, so that a gap is a gap", () => {
    const runs = runsOf([week(1), week(2), week(null), week(3), week(null)], ({ temperatureC }) => temperatureC);
    expect(runs).toEqual([[{ index: 0, value: 1 }, { index: 1, value: 2 }], [{ index: 3, value: 3 }]]);
    expect(runsOf([], () => null)).toEqual([]);
  });

  it("spans all that is drawn, and tells what is unusual only where both are known", () => {
    expect(extentOf([week(-3, 4), week(null, 9)])).toEqual([-3, 9]);
    expect(extentOf([week(null)])).toBeNull();
    expect([differenceOf(week(5, 3)), differenceOf(week(5)), differenceOf(week(null, 3))]).toEqual([2, null, null]);
  });
});

describe("words searched for", () => {
  it("are found in any of the texts, in any case, each of them", () => {
    expect(holdsWords("oat LARK", ["P1", "Oat bar", "Larkfield", null])).toBe(true);
    expect(holdsWords("oat nut", ["P1", "Oat bar"])).toBe(false);
    expect(holdsWords("", ["P1"])).toBe(true);
  });
});
