import { describe, expect, it } from "vitest";
import {
  CalendarError,
  addWeeks,
  firstDayOfWeek,
  isoWeekOf,
  parseWeek,
  requireChainCalendar,
  weekLabel,
  weekNumberOf,
} from "@shared/calendar";
import type { ChainCalendar, WeekStart } from "@shared/calendar";

const iso: ChainCalendar = { kind: "iso", weekStart: 1 };
const retail: ChainCalendar = { kind: "4-5-4", weekStart: 0 };
const everyStart: WeekStart[] = [0, 1, 2, 3, 4, 5, 6];

const codeOf = (run: () => unknown) => {
  try {
    run();
  } catch (error) {
    if (error instanceof CalendarError) return error.code;
    throw error;
  }
  return "nothing thrown";
};

describe("a chain's calendar", () => {
  it("labels a week by its own numbering", () => {
    expect(weekLabel(iso, "2026-06-08")).toBe("2026-W24");
    expect(weekLabel(iso, "2026-12-28")).toBe("2026-W53");
    expect(weekLabel(retail, "2024-02-04")).toBe("2024 week 1");
    expect(weekLabel(retail, "2024-01-28")).toBe("2023 week 53");
  });

  it("reads an ISO week number only under ISO", () => {
    expect(parseWeek(iso, "2026-W24")).toBe("2026-06-08");
    expect(codeOf(() => parseWeek(retail, "2026-W24"))).toBe("week-number-needs-iso");
    expect(() => parseWeek(retail, "2026-W24")).toThrow(
      '"2026-W24" is an ISO week number, but the chain uses the 4-5-4 calendar: give the week\'s first day.',
    );
  });

  it("refuses week 53 of a year with 52 weeks", () => {
    expect(codeOf(() => parseWeek(iso, "2025-W53"))).toBe("no-such-week");
    expect(parseWeek(iso, "2020-W53")).toBe("2020-12-28");
  });

  it("reads a week by its first day and names the first day meant when another is given", () => {
    expect(parseWeek(iso, "2026-06-08")).toBe("2026-06-08");
    expect(() => parseWeek(iso, "2026-06-10")).toThrow(
      "2026-06-10 is a Wednesday, but weeks begin on Monday: the week that holds it begins on 2026-06-08.",
    );
    expect(codeOf(() => parseWeek(iso, "2026-06-10"))).toBe("not-a-first-day");
  });

  it.each(["2026W24", "2026-W4", "week 24", "2026-02-30", ""])("refuses %j with what it accepts", (text) => {
    expect(codeOf(() => parseWeek(iso, text))).toBe("not-a-week");
    expect(() => parseWeek(iso, text)).toThrow("a number such as 2026-W24");
    expect(() => parseWeek(retail, text)).toThrow("write its first day, YYYY-MM-DD.");
  });

  it.each(everyStart)("numbers each week once under ISO when weeks begin on weekday %i", (weekStart) => {
    const calendar: ChainCalendar = { kind: "iso", weekStart };
    const seen = new Set<string>();
    let week = firstDayOfWeek("2014-06-01", weekStart);
    for (let count = 0; count < 700; count++, week = addWeeks(week, 1)) {
      const label = weekLabel(calendar, week);
      expect(seen.has(label)).toBe(false);
      seen.add(label);
      expect(parseWeek(calendar, label)).toBe(week);
    }
  });

  it("numbers weeks that begin on Monday exactly as ISO 8601 does", () => {
    let week = "2014-12-29";
    for (let count = 0; count < 700; count++, week = addWeeks(week, 1)) {
      expect(weekNumberOf(iso, week)).toEqual(isoWeekOf(week));
    }
  });

  it("cannot be 4-5-4 with weeks that begin on another day than Sunday", () => {
    expect(requireChainCalendar(retail)).toBe(retail);
    expect(requireChainCalendar({ kind: "iso", weekStart: 4 }).weekStart).toBe(4);
    expect(() => requireChainCalendar({ kind: "4-5-4", weekStart: 1 })).toThrow(
      "Weeks of the 4-5-4 calendar run Sunday to Saturday: they cannot begin on Monday.",
    );
  });
});
