import { getISOWeek, getISOWeekYear } from "date-fns";
import { describe, expect, it } from "vitest";
import {
  addWeeks,
  dayFromNumber,
  dayNumber,
  dayOfWeek,
  isoWeekMonday,
  isoWeekOf,
  isoWeeksInYear,
  retailWeekOf,
  retailWeekSunday,
  retailWeeksInYear,
  retailYearStart,
} from "@shared/calendar";

const yearsWhere = (from: number, to: number, holds: (year: number) => boolean) =>
  Array.from({ length: to - from + 1 }, (_, index) => from + index).filter(holds);

describe("ISO 8601 weeks", () => {
  it("agree with an independent implementation on every day from 1975 to 2075", () => {
    for (let number = dayNumber("1975-01-01"); number <= dayNumber("2075-12-31"); number++) {
      const day = dayFromNumber(number);
      const [year, month, date] = day.split("-").map(Number);
      const noon = new Date(year, month - 1, date, 12);
      expect(isoWeekOf(day)).toEqual({ year: getISOWeekYear(noon), week: getISOWeek(noon) });
    }
  });

  it("number 53 in 2015, 2020 and 2026, and in 71 years of each 400", () => {
    expect(yearsWhere(2010, 2030, (year) => isoWeeksInYear(year) === 53)).toEqual([2015, 2020, 2026]);
    expect(yearsWhere(2000, 2399, (year) => isoWeeksInYear(year) === 53)).toHaveLength(71);
  });

  it("belong to the year of their Thursday", () => {
    expect(isoWeekOf("2027-01-03")).toEqual({ year: 2026, week: 53 });
    expect(isoWeekOf("2024-12-30")).toEqual({ year: 2025, week: 1 });
    expect(isoWeekOf("2021-01-03")).toEqual({ year: 2020, week: 53 });
  });

  it("begin on the Monday that their number names", () => {
    expect(isoWeekMonday({ year: 2026, week: 24 })).toBe("2026-06-08");
    for (const year of yearsWhere(2000, 2030, () => true)) {
      for (let week = 1; week <= isoWeeksInYear(year); week++) {
        const monday = isoWeekMonday({ year, week });
        expect(dayOfWeek(monday)).toBe(1);
        expect(isoWeekOf(monday)).toEqual({ year, week });
      }
    }
  });

  it.each([0, 53, 1.5])("refuse week %d of 2025", (week) => {
    expect(() => isoWeekMonday({ year: 2025, week })).toThrow(`2025 has ISO weeks 1 to 52: there is no week ${week}.`);
  });
});

describe("4-5-4 weeks", () => {
  it("begin fiscal years on the Sundays of the National Retail Federation's calendar", () => {
    const published: Record<number, string> = {
      2012: "2012-01-29", 2013: "2013-02-03", 2017: "2017-01-29", 2018: "2018-02-04",
      2022: "2022-01-30", 2023: "2023-01-29", 2024: "2024-02-04", 2025: "2025-02-02",
    };
    for (const [year, start] of Object.entries(published)) expect(retailYearStart(Number(year))).toBe(start);
  });

  it("number 53 in fiscal 2012, 2017 and 2023", () => {
    expect(yearsWhere(2009, 2027, (year) => retailWeeksInYear(year) === 53)).toEqual([2012, 2017, 2023]);
    expect(yearsWhere(1950, 2100, (year) => ![52, 53].includes(retailWeeksInYear(year)))).toEqual([]);
  });

  it("end every year on the Saturday nearest 31 January", () => {
    for (const year of yearsWhere(1990, 2060, () => true)) {
      const gap = dayNumber(retailYearStart(year)) - 1 - dayNumber(`${year}-01-31`);
      expect(Math.abs(gap)).toBeLessThanOrEqual(3);
      expect(dayOfWeek(retailYearStart(year))).toBe(0);
    }
  });

  it("fall into months of 4, 5 and 4 weeks, the last one 5 in a 53-week year", () => {
    const monthLengths = (year: number) => {
      const lengths = new Array<number>(12).fill(0);
      for (let week = 0; week < retailWeeksInYear(year); week++) {
        lengths[retailWeekOf(addWeeks(retailYearStart(year), week)).month - 1]++;
      }
      return lengths;
    };
    expect(monthLengths(2024)).toEqual([4, 5, 4, 4, 5, 4, 4, 5, 4, 4, 5, 4]);
    expect(monthLengths(2023)).toEqual([4, 5, 4, 4, 5, 4, 4, 5, 4, 4, 5, 5]);
  });

  it("hold each of their seven days", () => {
    expect(retailWeekOf("2024-02-03")).toEqual({ year: 2023, week: 53, month: 12, weekOfMonth: 5 });
    expect(retailWeekOf("2024-02-04")).toEqual({ year: 2024, week: 1, month: 1, weekOfMonth: 1 });
    expect(retailWeekOf("2024-01-01")).toEqual({ year: 2023, week: 49, month: 12, weekOfMonth: 1 });
  });

  it("begin on the Sunday that their number names, and refuse a 53rd week where there is none", () => {
    expect(retailWeekSunday({ year: 2023, week: 53 })).toBe("2024-01-28");
    expect(() => retailWeekSunday({ year: 2024, week: 53 })).toThrow("Fiscal 2024 has weeks 1 to 52: there is no week 53.");
  });
});
