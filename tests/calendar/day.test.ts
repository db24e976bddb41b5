import { afterEach, describe, expect, it } from "vitest";
import { addDays, dayFromNumber, dayNumber, dayOfWeek, dayOfYear, daysInYear, isDay, yearOf } from "@shared/calendar";

const zoneOfTheMachine = process.env.TZ;

afterEach(() => {
  if (zoneOfTheMachine === undefined) delete process.env.TZ;
  else process.env.TZ = zoneOfTheMachine;
});

describe("days", () => {
  it("are counted from 1970-01-01", () => {
    expect(dayNumber("1970-01-01")).toBe(0);
    expect(dayNumber("1969-12-31")).toBe(-1);
    expect(dayNumber("2000-03-01")).toBe(11_017);
  });

  it("come back from their number, for every day of a century and a half", () => {
    for (let number = -25_567; number < 29_220; number++) {
      expect(dayNumber(dayFromNumber(number))).toBe(number);
    }
  });

  it("agree with the platform's own UTC dates from the year 100 to 9999", () => {
    const [first, last] = [dayNumber("0100-01-01"), dayNumber("9999-12-31")];
    for (let number = first; number <= last; number += 97) {
      expect(dayFromNumber(number)).toBe(new Date(number * 86_400_000).toISOString().slice(0, 10));
    }
    expect(dayFromNumber(last)).toBe("9999-12-31");
    expect(() => dayFromNumber(last + 1)).toThrow(`Day number ${last + 1} is not a day of the years 100 to 9999.`);
    expect(() => dayFromNumber(0.5)).toThrow("Day number 0.5 is not a day");
    expect(() => dayFromNumber(Number.NaN)).toThrow("Day number NaN is not a day");
  });

  it.each([
    "2023-02-29", "1900-02-29", "2024-13-01", "2024-00-10", "2024-04-31", "0050-01-01", "9999-12-32", "24-01-01", "2024-1-1", "",
    "2024-01-01T00:00",
  ])(
    "refuse %j, which is no day",
    (text) => {
      expect(isDay(text)).toBe(false);
      expect(() => dayNumber(text)).toThrow(`"${text}" is not a day: a day is written YYYY-MM-DD and must exist.`);
    },
  );

  it("accept leap days where the Gregorian rule has them", () => {
    expect(["2024-02-29", "2000-02-29", "2400-02-29"].map(isDay)).toEqual([true, true, true]);
    expect([2024, 2000, 1900, 2023, 2100].map(daysInYear)).toEqual([366, 366, 365, 365, 365]);
  });

  it("know their weekday, place in the year and year", () => {
    expect(dayOfWeek("2026-06-08")).toBe(1);
    expect(dayOfWeek("1990-06-14")).toBe(4);
    expect(dayOfWeek("1969-12-28")).toBe(0);
    expect([dayOfYear("2024-12-31"), dayOfYear("2023-12-31"), dayOfYear("2024-03-01")]).toEqual([366, 365, 61]);
    expect(yearOf("2026-06-08")).toBe(2026);
  });

  it.each(["Europe/London", "America/Sao_Paulo", "Pacific/Apia", "Australia/Lord_Howe"])(
    "are added alike in the zone %s, where clocks change and days go missing",
    (zone) => {
      process.env.TZ = zone;
      expect(addDays("2026-03-28", 2)).toBe("2026-03-30");
      expect(addDays("2018-11-03", 1)).toBe("2018-11-04");
      expect(addDays("2011-12-29", 1)).toBe("2011-12-30");
      expect(addDays("2026-10-26", -1)).toBe("2026-10-25");
    },
  );
});
