import { describe, expect, it } from "vitest";
import {
  addDays,
  addWeeks,
  dayFromNumber,
  dayOfWeek,
  firstDayOfWeek,
  lastDayOfWeek,
  middleDayOfWeek,
  parseWeekStart,
  weekFromIndex,
  weekIndex,
  weekdayNames,
  weeksApart,
  weeksBetween,
  yearFraction,
} from "@shared/calendar";
import type { WeekStart } from "@shared/calendar";

const everyStart: WeekStart[] = [0, 1, 2, 3, 4, 5, 6];

describe("weeks with any start", () => {
  it.each(everyStart)("begin on weekday %i and hold the day asked for", (weekStart) => {
    for (let number = 20_000; number < 20_400; number++) {
      const day = dayFromNumber(number);
      const first = firstDayOfWeek(day, weekStart);
      expect(dayOfWeek(first)).toBe(weekStart);
      expect(first <= day && day <= lastDayOfWeek(first)).toBe(true);
    }
  });

  it("of the orange-juice chain begin on Thursday", () => {
    expect(firstDayOfWeek("1990-06-20", 4)).toBe("1990-06-14");
    expect(lastDayOfWeek("1990-06-14")).toBe("1990-06-20");
    expect(middleDayOfWeek("1990-06-14")).toBe("1990-06-17");
  });

  it("are added across a leap day and across a change of summer time", () => {
    expect(addWeeks("2024-02-26", 1)).toBe("2024-03-04");
    expect(addWeeks("2026-03-23", 1)).toBe("2026-03-30");
    expect(addWeeks("2026-01-05", -1)).toBe("2025-12-29");
  });

  it("are listed with both ends, and none when the last lies before the first", () => {
    expect(weeksBetween("2026-06-08", "2026-06-22")).toEqual(["2026-06-08", "2026-06-15", "2026-06-22"]);
    expect(weeksBetween("2026-06-08", "2026-06-08")).toEqual(["2026-06-08"]);
    expect(weeksBetween("2026-06-08", "2026-06-01")).toEqual([]);
  });

  it("refuse ends that are not whole weeks apart, and lists longer than thirty years", () => {
    expect(() => weeksBetween("2026-06-08", "2026-06-18")).toThrow(
      "2026-06-08 and 2026-06-18 are 10 days apart, which is not whole weeks.",
    );
    expect(() => weeksBetween("1900-01-01", addWeeks("1900-01-01", 1_600))).toThrow(
      "are 1601 weeks: at most 1600 are listed at once.",
    );
  });

  it("are counted apart in both directions", () => {
    expect(weeksApart("2026-06-08", "2026-07-13")).toBe(5);
    expect(weeksApart("2026-07-13", "2026-06-08")).toBe(-5);
  });
});

describe("the week index", () => {
  it("is zero for the week of 5 January 1970 and grows by one each week", () => {
    expect(weekIndex("1970-01-05")).toBe(0);
    expect(weekIndex("1969-12-29")).toBe(-1);
    expect(weekIndex("2026-06-08")).toBe(2944);
  });

  it.each(everyStart)("counts every week once and comes back, for weeks from weekday %i", (weekStart) => {
    let week = firstDayOfWeek("2019-12-01", weekStart);
    const start = weekIndex(week);
    for (let step = 0; step < 120; step++, week = addWeeks(week, 1)) {
      expect(weekIndex(week)).toBe(start + step);
      expect(weekFromIndex(start + step, weekStart)).toBe(week);
    }
  });
});

describe("the year fraction", () => {
  it("is the middle of the week's middle day", () => {
    expect(yearFraction("2025-06-30")).toBeCloseTo(183.5 / 365, 15);
    expect(yearFraction("2023-12-29")).toBeCloseTo(0.5 / 366, 15);
    expect(yearFraction("2024-12-28")).toBeCloseTo(365.5 / 366, 15);
  });

  it("moves by a week on the circle from each week to the next, in 53-week years too", () => {
    for (const from of ["2014-12-01", "2020-11-30", "2026-11-30"]) {
      for (const week of weeksBetween(from, addWeeks(from, 60))) {
        const step = (yearFraction(addWeeks(week, 1)) - yearFraction(week) + 1) % 1;
        // 7/366 to 7/365, up to half a day's difference where a leap year meets an ordinary one.
        expect(Math.abs(step - 7 / 365.25)).toBeLessThan(6e-5);
      }
    }
  });

  it("lies strictly between 0 and 1 for every day a week can begin on", () => {
    for (let day = "2023-12-01"; day < "2025-02-01"; day = addDays(day, 1)) {
      expect(yearFraction(day)).toBeGreaterThan(0);
      expect(yearFraction(day)).toBeLessThan(1);
    }
  });
});

describe("the start of a week", () => {
  it("is read from a number, its text or a name in any case", () => {
    expect([0, "6", "Thursday", " monday "].map(parseWeekStart)).toEqual([0, 6, 4, 1]);
    expect(weekdayNames.map(parseWeekStart)).toEqual(everyStart);
  });

  it.each([7, -1, 1.5, "someday", "", "10"])("is refused when it is %j", (value) => {
    expect(() => parseWeekStart(value)).toThrow(`"${value}" is no start of a week: use 0 (Sunday) to 6 (Saturday) or sunday,`);
  });
});
