import { describe, expect, it } from "vitest";
import type { Curve, FitSummary, Model, SalesWeek } from "@shared/contract/drivers";
import type { Extract } from "@shared/contract/extracts";
import { ApiError } from "@/lib/api-error";
import { changesSentence } from "@/features/extracts/view/changes-summary";
import { describeState, isInWork, kindFromName } from "@/features/extracts/view/extract-state";
import { uploadProblem } from "@/features/extracts/view/upload-problem";
import { cautionsOf } from "@/features/drivers/view/cautions";
import { chooseFit, chooseModel, newerCandidate, weeksNotLearnt } from "@/features/drivers/view/choose-model";
import { curvePoints, factorLevels, levelLabel, referenceLevel } from "@/features/drivers/view/curve-points";
import { driverColour, driverLabel, inLaneOrder } from "@/features/drivers/view/driver-words";
import { plainWarning } from "@/features/drivers/view/plain-warning";
import { elasticityAt } from "@/features/drivers/view/elasticity";
import { medianOf, newestRegularPrice, pastWeeks } from "@/features/drivers/view/past-weeks";
import { weekAtFraction } from "@/features/drivers/view/week-at-fraction";
import { swingOf } from "@/features/stores/view/curve-swing";
import { intervalDomain } from "@/features/stores/view/interval-domain";
import { regionGroups } from "@/features/stores/view/store-groups";

const rows = { read: 100, usable: 90, errors: 10, warnings: 0 };

describe("extracts", () => {
  it("say in a word where they stand, with errors and without usable rows apart", () => {
    const word = (part: Partial<Extract>) => describeState({ state: "checked", rows, layout: null, failure: null, ...part });
    expect(word({ rows: { ...rows, errors: 0 } }).word).toBe("Ready to load");
    expect(word({}).word).toBe("Ready, with errors");
    expect(word({ rows: { ...rows, usable: 0 } })).toEqual({ word: "No usable rows", tone: "danger" });
    expect(word({ layout: { origin: "proposed", id: null, name: null, isConfirmed: false } }).word).toBe("Reading to confirm");
    expect(word({ state: "unusable", failure: { code: "layout-needed", detail: "x" } }).word).toBe("Columns to match");
  });

  it("are watched while a job works on them or soon will, not once a check broke down", () => {
    const failure: Extract["failure"] = { code: "x", detail: "It broke down." };
    expect(isInWork({ state: "received", failure: null })).toBe(true);
    expect(isInWork({ state: "received", failure })).toBe(false);
    expect(isInWork({ state: "loading", failure: null })).toBe(true);
    expect(isInWork({ state: "loaded", failure: null })).toBe(false);
  });

  it.each([
    ["stores.csv", "stores"],
    ["Product list 2026.csv.gz", "products"],
    ["weather-coast.csv", "temperatures"],
    ["event_calendar.csv", "events"],
    ["2026-W24.csv", "sales"],
  ])("named %s most likely hold %s", (name, kind) => {
    expect(kindFromName(name)).toBe(kind);
  });

  it("say what a load does in a sentence", () => {
    const changes = (totals: { new: number; changed: number; same: number }) => ({ totals: { ...totals, missing: 0 }, weeks: [], secondLook: [] });
    expect(changesSentence(changes({ new: 1248, changed: 1, same: 0 }), false)).toBe("1,248 new rows, 1 row changed.");
    expect(changesSentence(changes({ new: 0, changed: 0, same: 0 }), false)).toBe("Nothing would change: every row is there already.");
  });

  it("that did not arrive say what was kept", () => {
    expect(uploadProblem(new DOMException("", "AbortError"))).toBe("Stopped. Nothing was kept.");
    expect(uploadProblem(new ApiError({ status: 0, code: "unreachable", detail: "x" }))).toMatch(
      /Nothing was kept; try again/,
    );
    expect(uploadProblem(new ApiError({ status: 413, code: "too-large", detail: "The file is too large." }))).toBe(
      "The file is too large.",
    );
  });
});

const curve = (more: Partial<Curve>): Curve => ({
  term: "price",
  driver: "price",
  kind: "smooth",
  column: "price",
  x: [1, 1.5, 2],
  estimate: [0.5, 0, -0.5],
  standardError: [0.1, 0.1, 0.1],
  lower: [0.4, -0.1, -0.6],
  upper: [0.6, 0.1, -0.4],
  observedRange: [1, 2],
  supportCount: [5, 9, 5],
  seen: [1, 1.5, 2],
  elasticity: null,
  ...more,
});
const promotion = curve({
  driver: "promotion",
  kind: "factor",
  x: ["both", "feature", "none", "display"],
  estimate: [0.6, 0.35, 0, 0.3],
  standardError: [0.1, 0.05, 0, 0.05],
  lower: [0.5, 0.3, 0, 0.2],
  upper: [0.7, 0.4, 0, 0.4],
  supportCount: [3, 20, 120, 9],
  seen: [],
});

describe("drivers", () => {
  it("are drawn as multipliers of an average week", () => {
    const points = curvePoints({ ...curve({}), x: [1, 1.5, 2] });
    expect(points[0].estimate).toBeCloseTo(Math.exp(0.5), 12);
    expect(points[1]).toMatchObject({ x: 1.5, estimate: 1 });
  });

  it("of levels come in the usual order against the level that is one without doubt", () => {
    const levels = { ...promotion, x: ["both", "feature", "none", "display"] };
    expect(factorLevels(levels).map(({ value }) => value)).toEqual(["none", "feature", "display", "both"]);
    expect(referenceLevel(levels)).toBe("none");
    expect(levelLabel("multi_buy")).toBe("Multi-buy");
  });

  it("have an elasticity at any price, straight between the points known", () => {
    const known = curve({ elasticity: { estimate: [-3, -2, -1], lower: [-4, -3, -2], upper: [-2, -1, 0] } });
    expect(elasticityAt(known, 1.25)).toEqual({ estimate: -2.5, lower: -3.5, upper: -1.5 });
    expect(elasticityAt(known, 0.5)?.estimate).toBe(-3);
    expect(elasticityAt(known, 9)?.estimate).toBe(-1);
    expect(elasticityAt(curve({}), 1.25)).toBeNull();
  });

  it("keep their colours, names and order, whatever else a model holds", () => {
    expect(
      inLaneOrder([{ driver: "rain" }, { driver: "promotion" }, { driver: "price" }]).map(({ driver }) => driver),
    ).toEqual(["price", "promotion", "rain"]);
    expect([driverColour("season"), driverColour("rain")]).toEqual(["week", "trend"]);
    expect([driverLabel("price:promotion"), driverLabel("rain")]).toEqual(["Price × Promotion", "rain"]);
  });

  it("place a year fraction in the chain's week that holds it", () => {
    expect(weekAtFraction(0.48, 2026, 1)).toBe("2026-06-22");
    expect(weekAtFraction(1, 2026, 1)).toBe("2026-12-28");
    expect(weekAtFraction(0, 2024, 4)).toBe("2023-12-28");
  });

  it("show weeks with a gap where one is missing, and the newest regular price", () => {
    const week = (first: string, units: number, regularPrice: number | null): SalesWeek => ({
      week: first,
      units,
      netSales: 0,
      price: null,
      priceSource: "shelf",
      regularPrice,
      promotion: "none",
      mechanic: "none",
      temperatureC: null,
      event: null,
      openDays: null,
      stockOutDays: null,
    });
    const sales = [week("2026-06-22", 3, null), week("2026-06-08", 5, 1.79)];
    expect(pastWeeks(sales, (first) => ({ label: first, year: 2026 })).map(({ units }) => units)).toEqual([5, null, 3]);
    expect(newestRegularPrice(sales)).toBe(1.79);
    expect([medianOf([3, 1, 2]), medianOf([4, 1, 2, 3]), medianOf([])]).toEqual([2, 2, null]);
  });

  const fit = (store: string): FitSummary => ({
    store,
    rows: 100,
    firstWeek: "2024-06-03",
    lastWeek: "2026-05-25",
    devianceExplained: 0.9,
    dispersion: 2,
    edf: 10,
    converged: true,
    warnings: [],
    stockOuts: { leftOut: 0, partly: 0 },
    leftOut: [],
    straightLines: [],
    priceLearning: { weeksMoved: 12, regularPrices: 5, enough: true },
    meanWeeklyUnits: 10,
    meanBaseUnits: 9,
  });
  const model = (id: string, more: Partial<Model>): Model => ({
    id,
    product: "P1",
    state: "candidate",
    spec: null,
    createdAt: "2026-06-01T00:00:00.000Z",
    createdBy: "Ada",
    jobId: null,
    usedFrom: null,
    usedUntil: null,
    fits: [fit("S1"), fit("S2")],
    newerWeeks: 0,
    skipped: [],
    notForPlans: null,
    may: { use: false },
    ...more,
  });

  it("are shown by the model asked for, else the one in use, else the newest that knows a store", () => {
    const models = [model("new", { createdAt: "2026-06-03T00:00:00.000Z" }), model("used", { state: "in-use" })];
    expect(chooseModel(models, "new")?.id).toBe("new");
    expect(chooseModel(models, null)?.id).toBe("used");
    expect(chooseModel([model("empty", { fits: [] }), models[0]], null)?.id).toBe("new");
    expect(newerCandidate(models, models[1])?.id).toBe("new");
    expect(newerCandidate(models, models[0])).toBeUndefined();
    expect(chooseFit(models[0], "S2")?.store).toBe("S2");
    expect(chooseFit(models[0], "S9")?.store).toBe("S1");
  });

  it("miss the weeks loaded since, unless a newer fit that waits knows them", () => {
    const used = model("used", { state: "in-use", newerWeeks: 3 });
    expect(weeksNotLearnt(used, undefined)).toBe(3);
    expect(weeksNotLearnt(used, model("new", { newerWeeks: 1 }))).toBe(1);
    expect(weeksNotLearnt(used, model("new", {}))).toBe(0);
  });

  it("warn in the words of the page", () => {
    expect(plainWarning('Term "yearFraction": the data show no effect; its penalty went to its limit.')).toBe(
      "Week of year: its weeks show no effect, and so it is drawn.",
    );
    expect(plainWarning("It was sold out often.")).toBe("It was sold out often.");
  });

  it("carry what is to be distrusted, in sentences", () => {
    const thin = { ...fit("S1"), converged: false, priceLearning: { weeksMoved: 1, regularPrices: 2, enough: false } };
    const cautions = cautionsOf(model("m", { notForPlans: "It has no price curve." }), thin);
    expect(cautions).toEqual([
      "The fit did not settle: take its curves as a sketch.",
      "Price moved without promotion in 1 week only, at 2 regular prices: too little to trust its elasticity.",
      "It has no price curve.",
    ]);
    expect(cautionsOf(model("m", {}), fit("S1"))).toEqual([]);
  });
});

describe("stores", () => {
  it("have a shape and a colour by region, the smallest beyond six together", () => {
    const { groups, of } = regionGroups(["town", "coast", "moor", "coast"].map((region) => ({ region })));
    expect(groups).toEqual([
      { group: 1, name: "coast", count: 2 },
      { group: 2, name: "moor", count: 1 },
      { group: 3, name: "town", count: 1 },
    ]);
    expect(of("town")).toBe(3);
    const many = regionGroups("aabbccddeeffgh".split("").map((region) => ({ region })));
    expect(many.groups).toHaveLength(6);
    expect(many.groups[5]).toEqual({ group: 6, name: "other regions", count: 4 });
    expect(many.of("h")).toBe(6);
  });

  it("swing from their lowest to their highest point within what they saw", () => {
    const points = [0.5, 1, 2, 8].map((estimate, x) => ({ x, estimate, lower: estimate, upper: estimate }));
    expect(swingOf(points, [0, 2])).toEqual({ ratio: 4, highestAt: 2 });
    expect(swingOf(points, null)).toEqual({ ratio: 16, highestAt: 3 });
    expect(swingOf(points, [9, 10])).toBeNull();
  });

  it("share one axis that one wide interval does not set", () => {
    const [low, high] = intervalDomain(
      [
        { estimate: -2, lower: -2.3, upper: -1.7 },
        { estimate: -1.5, lower: -40, upper: 30 },
      ],
      -1,
    );
    expect(low).toBeGreaterThan(-3);
    expect(high).toBeGreaterThanOrEqual(-1);
    expect(high).toBeLessThan(0);
  });
});
