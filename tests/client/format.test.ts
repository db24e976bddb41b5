import { describe, expect, it } from "vitest";
import { formatBytes } from "@/lib/format/bytes";
import { createChainFormat, neutralSettings } from "@/lib/format/chain-format";
import { formatDuration, formatWeekDays } from "@/lib/format/date";
import { formatMoney, formatPrice } from "@/lib/format/money";
import { countOf, formatMultiplier, formatNumber, formatRange, formatUnits } from "@/lib/format/number";
import { parseNumber } from "@/lib/format/parse-number";
import { formatPercent, formatPercentInterval } from "@/lib/format/percent";
import { formatTemperature } from "@/lib/format/temperature";
import { secondsLeft } from "@/lib/use-time-left";

const thin = "\u202F";
const minus = "\u2212";

describe("numbers", () => {
  it("carry a real minus sign and a plus where asked", () => {
    expect(formatNumber(-1234.5, { digits: 1 })).toBe(`${minus}1,234.5`);
    expect(formatNumber(2858, { signed: true })).toBe("+2,858");
  });

  it("carry no sign where they round to zero", () => {
    expect(formatNumber(-0.4)).toBe("0");
    expect(formatNumber(0.04, { signed: true, digits: 1 })).toBe("0.0");
  });

  it("show a dash where there is none", () => {
    expect(formatNumber(null)).toBe("–");
    expect(formatPercent(Number.NaN)).toBe("–");
    expect(formatMoney(undefined, { currency: "EUR" })).toBe("–");
  });

  it("of units keep a decimal only where a whole number would hide the matter", () => {
    expect([formatUnits(10210.4), formatUnits(3.25), formatUnits(3)]).toEqual(["10,210", "3.3", "3"]);
  });

  it("of multipliers stand after a times sign", () => {
    expect(formatMultiplier(1.518)).toBe(`×${thin}1.52`);
    expect(formatMultiplier(0.0345)).toBe(`×${thin}0.035`);
  });

  it("of intervals are joined by a dash", () => {
    expect(formatRange("9,150", "11,380")).toBe(`9,150${thin}–${thin}11,380`);
  });

  it("count in the singular and the plural", () => {
    expect([countOf(1, "row"), countOf(2316, "row"), countOf(0, "store is", "stores are")]).toEqual([
      "1 row",
      "2,316 rows",
      "0 stores are",
    ]);
  });
});

describe("percents, money, temperatures and sizes", () => {
  it("write a lift with its sign and a thin space", () => {
    expect(formatPercent(0.42, { signed: true })).toBe(`+42${thin}%`);
    expect(formatPercent(-0.037, { digits: 1 })).toBe(`${minus}3.7${thin}%`);
    expect(formatPercentInterval(1.17, 1.7)).toBe("+117 to +170");
  });

  it("write money in the chain's currency with the minus before the sign", () => {
    expect(formatMoney(15213.4, { currency: "EUR" })).toBe("€15,213");
    expect(formatMoney(-212, { currency: "EUR" })).toBe(`${minus}€212`);
    expect(formatMoney(7677, { currency: "EUR", signed: true })).toBe("+€7,677");
  });

  it("write prices in the currency's own decimals", () => {
    expect(formatPrice(1.5, { currency: "EUR" })).toBe("€1.50");
    expect(formatPrice(198, { currency: "JPY" })).toBe("¥198");
  });

  it("write temperatures in the unit the chain reads", () => {
    expect(formatTemperature(24)).toBe(`24${thin}°C`);
    expect(formatTemperature(-5)).toBe(`${minus}5${thin}°C`);
    expect(formatTemperature(24, { unit: "fahrenheit" })).toBe(`75${thin}°F`);
  });

  it("write sizes in decimal units", () => {
    expect([formatBytes(812), formatBytes(12_400_000), formatBytes(2e9)]).toEqual([
      `812${thin}bytes`,
      `12.4${thin}MB`,
      `2.0${thin}GB`,
    ]);
  });
});

describe("days and weeks", () => {
  it("of one month name it once, of two months name both, over New Year both years", () => {
    expect(formatWeekDays("2026-06-22")).toBe("22–28 June 2026");
    expect(formatWeekDays("2026-06-29")).toBe("29 June – 5 July 2026");
    expect(formatWeekDays("2026-12-28")).toBe("28 December 2026 – 3 January 2027");
  });

  it("are numbered by the chain's calendar", () => {
    const iso = createChainFormat(neutralSettings);
    expect(iso.weekSpan("2026-06-08", "2026-07-13")).toBe("weeks 24–29, 2026");
    expect(iso.weekName("2025-12-29")).toEqual({ label: "wk 1", year: 2026 });
    expect(iso.weekSpan("2026-06-08", "2026-06-08")).toBe("week 24, 2026");
    expect(iso.weekSpan("2025-12-22", "2026-01-05")).toBe("week 52, 2025 – week 2, 2026");
    const retail = createChainFormat({ ...neutralSettings, calendar: "4-5-4", weekStart: 0 });
    expect(retail.week("2024-02-04")).toBe("week 1");
  });

  it("left to wait are as precise as they deserve", () => {
    expect([3, 42, 70, 200, 9000].map(formatDuration)).toEqual([
      "a few seconds",
      "40 seconds",
      "a minute",
      "3 minutes",
      "3 hours",
    ]);
  });

  it("left to wait follow the pace since the work was first seen", () => {
    const first = { done: 100, total: 1000, atMs: 0 };
    expect(secondsLeft(first, { done: 400, total: 1000, atMs: 3000 })).toBeCloseTo(6, 10);
    expect(secondsLeft(first, { done: 400, total: 1000, atMs: 500 })).toBeNull();
    expect(secondsLeft(first, { done: 100, total: 1000, atMs: 5000 })).toBeNull();
    expect(secondsLeft(first, { done: 400, total: null, atMs: 5000 })).toBeNull();
  });
});

describe("numbers as people type them", () => {
  it.each([
    ["1.49", 1.49],
    ["1,49", 1.49],
    ["€1.49", 1.49],
    ["−5", -5],
    ["-5 °C", -5],
    ["+12 %", 12],
    ["1 250,5", 1250.5],
    ["1,250.5", 1250.5],
    ["1.250,5", 1250.5],
    ["1,234,567", 1234567],
  ])("reads %s", (text, value) => {
    expect(parseNumber(text)).toBe(value);
  });

  it.each(["", "abc", "€", "--"])("takes %j for no number", (text) => {
    expect(parseNumber(text)).toBeNull();
  });
});
