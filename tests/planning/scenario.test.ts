import { describe, expect, it } from "vitest";
import { fitModel } from "@shared/engine";
import type { FittedModel, ModelSpec } from "@shared/engine";
import {
  PlanningError,
  defaultSpec,
  describeVariation,
  predictScenario,
  prepareScenario,
  roundToCents,
  toModelData,
} from "@shared/planning";
import type { PlanCell, ScenarioPlan, StoreModel } from "@shared/planning";
import { salesRows } from "./a-sales-row";
import { aPlanCell, inventedModel, inventedWeeks, planCells } from "./an-invented-store";

const level = 0.8;
const model = inventedModel({ store: "S1", seed: 21 });
const oneStore: StoreModel[] = [{ store: "S1", model }];
const twoStores: StoreModel[] = [...oneStore, { store: "S2", model: inventedModel({ store: "S2", seed: 22 }) }];
const predictWith = (fitted: FittedModel, changes: Partial<PlanCell>) =>
  predictScenario({ stores: [{ store: "S1", model: fitted }], cells: [aPlanCell(changes)], level });
const predictOne = (changes: Partial<PlanCell>) => predictWith(model, changes);
const codesOf = ({ flags }: ReturnType<typeof predictOne>) => flags.map((flag) => `${flag.code} ${flag.driver}`);

describe("weeks and stores of a scenario", () => {
  const cells = planCells({ stores: ["S2", "S1"], weeks: 5 }, (_, index) => ({ price: 1.4 + index / 50 }));
  const prediction = predictScenario({ stores: twoStores, cells: [...cells].reverse(), level });

  it("add up to the totals, in order of weeks and of the stores prepared", () => {
    expect(prediction.weeks.map(({ week }) => week)).toEqual(["2026-06-08", "2026-06-15", "2026-06-22", "2026-06-29", "2026-07-06"]);
    expect(prediction.stores.map(({ store }) => store)).toEqual(["S1", "S2"]);
    for (const parts of [prediction.weeks.map(({ units, baseUnits }) => ({ units: units.estimate, baseUnits })), prediction.stores]) {
      expect(parts.reduce((sum, part) => sum + part.units, 0)).toBeCloseTo(prediction.units.estimate, 9);
      expect(parts.reduce((sum, part) => sum + part.baseUnits, 0)).toBeCloseTo(prediction.baseUnits, 9);
    }
  });

  it("have in a scenario of one week that week's interval as their total's", () => {
    const { weeks, units } = predictScenario({ stores: twoStores, cells: planCells({ stores: ["S1", "S2"], weeks: 1 }), level });
    expect(weeks[0].units.lower).toBeCloseTo(units.lower, 8);
    expect(weeks[0].units.upper).toBeCloseTo(units.upper, 8);
  });

  it("leave a store without planned weeks out", () => {
    const { stores } = predictScenario({ stores: twoStores, cells: [aPlanCell({ store: "S2" })], level });
    expect(stores.map(({ store }) => store)).toEqual(["S2"]);
  });
});

describe("money of a scenario", () => {
  const plan: Partial<PlanCell> = {
    price: 1.573, regularPrice: 1.936, taxRate: 0.21, unitCost: 1.1, promotion: "feature", fundingPerUnit: 0.05,
  };

  it("is net of tax, rounded to cents once, with the supplier's funding in the plan's margin", () => {
    const { units, baseUnits, money } = predictOne(plan);
    expect(money.netSales).toEqual({ plan: roundToCents(units.estimate * 1.3), base: roundToCents(baseUnits * 1.6) });
    expect(money.grossMargin).toEqual({ plan: roundToCents(units.estimate * 0.25), base: roundToCents(baseUnits * 0.5) });
    expect(money.netGain).toBe(roundToCents(units.estimate * 0.25 - baseUnits * 0.5));
  });

  it("names the break-even lift of product and plan: (d - s) / (m - d + s) and the cost spread over the base", () => {
    const { baseUnits, money } = predictScenario({ stores: oneStore, cells: [aPlanCell(plan)], level, costs: { fixedCost: 20 } });
    // m = 0.50, d = 0.30, s = 0.05
    expect(money.breakEven).toEqual({ kind: "lift", lift: expect.closeTo(0.25 / 0.25 + 20 / (baseUnits * 0.25), 10) });
  });

  it("takes what is paid per unit where a multi-buy lowers it below the shelf price", () => {
    const multiBuy = { regularPrice: 1.936, price: 1.936, pricePaid: 1.452, mechanic: "multi_buy", unitCost: 1.1 } as const;
    const { units, money } = predictOne(multiBuy);
    expect(money.netSales.plan).toBe(roundToCents(units.estimate * 1.2));
  });

  it("tells no margin where a unit cost is not known", () => {
    const cells = planCells({ stores: ["S1"], weeks: 3 }, (_, index) => (index < 2 ? { unitCost: null } : {}));
    const { money } = predictScenario({ stores: oneStore, cells, level });
    expect(money.grossMargin).toBeNull();
    expect(money.netGain).toBeNull();
    expect(money.breakEven).toEqual({ kind: "unknown", reason: "The unit cost of 2 store-weeks is not known." });
    expect(money.netSales.plan).toBeGreaterThan(0);
  });

  it("cannot break even where the cut eats the margin", () => {
    expect(predictOne({ price: 1.01, unitCost: 0.9 }).money.breakEven).toEqual({ kind: "cannot break even" });
  });
});

describe("flags of a scenario", () => {
  it("are none for a plan well within what was seen", () => {
    expect(predictOne({ price: 1.6, promotion: "feature" }).flags).toEqual([]);
  });

  it("say where a planned value lies outside what was seen", () => {
    const { flags } = predictOne({ price: 0.99, temperatureC: 41 });
    expect(flags.map(({ code, driver, of, detail }) => ({ code, driver, of, detail }))).toContainEqual({
      code: "outside-range", driver: "price", of: "plan", detail: "Price 0.99 lies outside what was seen here.",
    });
    expect(flags.map((flag) => flag.detail)).toContain("Temperature 41 lies outside what was seen here.");
  });

  it("put stores and weeks with the same reason together", () => {
    const cells = planCells({ stores: ["S1", "S2"], weeks: 3 }, (_, index) => (index > 3 ? { price: index / 5 } : {}));
    const { flags } = predictScenario({ stores: twoStores, cells, level });
    expect(flags).toContainEqual({
      code: "outside-range", driver: "price", of: "plan", stores: ["S2"], weeks: ["2026-06-15", "2026-06-22"],
      detail: "Price 0.8 to 1 lies outside what was seen in 1 of 2 stores.",
    });
  });

  it("say where the base's regular price was never seen", () => {
    const { flags } = predictOne({ regularPrice: 2.99, price: 1.79 });
    expect(flags.map(({ of, detail }) => [of, detail])).toEqual([["base", "Regular price 2.99 lies outside what was seen here."]]);
  });

  it("name values that few weeks saw", () => {
    const weeks = inventedWeeks({ store: "S1", seed: 21 });
    const rows = weeks.map((row, index) => ({ ...row, display: index === 30, feature: index % 9 === 0 }));
    const { data } = toModelData(rows);
    const fitted = fitModel({ ...model.spec, terms: model.spec.terms.slice(0, 2) }, data);
    const { flags } = predictWith(fitted, { promotion: "display" });
    expect(flags.map((flag) => flag.detail)).toEqual(["Promotion display was seen in fewer than 5 weeks here."]);
  });

  it("predict a level that was never seen without an effect, and say so", () => {
    const rows = inventedWeeks({ store: "S1", seed: 21 }).map((row) => ({ ...row, display: false }));
    const fitted = fitModel({ ...model.spec, terms: model.spec.terms.slice(0, 2) }, toModelData(rows).data);
    const { flags, lift } = predictWith(fitted, { promotion: "both" });
    expect(lift.estimate).toBe(0);
    expect(flags.map(({ code, detail }) => [code, detail])).toEqual([
      ["never-seen", "Promotion both was never seen here: it is predicted without any effect of its own."],
    ]);
  });

  it("say that a driver which never varied has no effect to predict", () => {
    const rows = salesRows(60, (index) => ({ feature: index % 5 === 0, units: 40 + (index % 7) }));
    const spec: ModelSpec = { response: "units", family: "quasi-poisson", terms: [{ kind: "factor", column: "promotion" }] };
    const { flags, lift } = predictWith(fitModel(spec, toModelData(rows).data), { price: 1.5, temperatureC: 25 });
    expect(lift.estimate).toBe(0);
    expect(flags.map((flag) => flag.detail)).toEqual([
      "The effect of price could not be learnt here: it is left out of the prediction.",
      "The effect of temperature could not be learnt here: it is left out of the prediction.",
    ]);
  });

  it("warn of prices below cost, net of tax", () => {
    expect(codesOf(predictOne({ price: 1.6, unitCost: 1.3 }))).not.toContain("below-cost price");
    const { flags } = predictOne({ price: 1.6, unitCost: 1.35 });
    expect(flags.map((flag) => flag.detail)).toContain("The price without tax is below unit cost here.");
  });
});

describe("a prepared scenario", () => {
  it("tells after any number of changes what a fresh one tells", () => {
    const scenario = prepareScenario(twoStores);
    const plans: ScenarioPlan[] = [1.89, 1.7, 1.5, 1.5].flatMap((price, step) =>
      (["none", "feature"] as const).map((promotion) => ({
        level,
        cells: planCells({ stores: ["S1", "S2"], weeks: 3 + (step % 2) }, (cell) => ({
          price: cell.store === "S1" ? price : 1.8, promotion, temperatureC: 16 + step, event: step > 1 ? "fair" : null,
        })),
        costs: { fixedCost: step },
      })),
    );
    for (const plan of [...plans, ...plans.slice().reverse()]) {
      expect(scenario.evaluate(plan)).toEqual(predictScenario({ stores: twoStores, ...plan }));
    }
  });

  it.each<[string, Partial<PlanCell>]>([
    ["week", { week: "2026-12-14" }], ["event", { event: "fair" }], ["exposure", { exposure: 0.5 }], ["price", { price: 1.5 }],
    ["regular price", { regularPrice: 1.7 }], ["promotion", { promotion: "both" }], ["mechanic", { mechanic: "multi_buy" }],
    ["temperature", { temperatureC: 21 }], ["normal temperature", { normalTemperatureC: 12 }], ["unit cost", { unitCost: 1 }],
  ])("notices that nothing but the %s of a week changed", (_, changes) => {
    const rows = inventedWeeks({ store: "S1", seed: 23 }).map((row, index) => ({
      ...row,
      event: index % 13 === 0 ? "fair" : null,
      mechanic: index % 11 === 0 ? ("multi_buy" as const) : ("none" as const),
      units: Math.round(row.units * (index % 13 === 0 ? 1.3 : 1) * (index % 11 === 0 ? 1.2 : 1) * (1 + row.week.charCodeAt(6) / 200)),
    }));
    const { data } = toModelData(rows);
    const everyDriver = { store: "S1", model: fitModel(defaultSpec(describeVariation(data)).spec, data) };
    const scenario = prepareScenario([everyDriver]);
    const before = scenario.evaluate({ cells: [aPlanCell()], level });
    const after = scenario.evaluate({ cells: [aPlanCell(changes)], level });
    expect(after).toEqual(predictScenario({ stores: [everyDriver], cells: [aPlanCell(changes)], level }));
    expect(after).not.toEqual(before);
  });

  it("takes a temperature that is not planned for the normal one", () => {
    expect(predictOne({ temperatureC: null })).toEqual(predictOne({}));
    expect(predictOne({ temperatureC: 16, normalTemperatureC: null }).weather.units).toBe(0);
  });

  it("works with a log-gaussian model, whose expected value it sums", () => {
    const spec = { ...model.spec, family: "log-gaussian", terms: model.spec.terms.slice(0, 2) } as const;
    const rows = inventedWeeks({ store: "S1", seed: 21 }).map((row) => ({ ...row, units: Math.max(1, row.units) }));
    const fitted = fitModel(spec, toModelData(rows).data);
    const { units, baseUnits, lift, split } = predictWith(fitted, { price: 1.5 });
    expect(lift.estimate).toBeCloseTo(units.estimate / baseUnits - 1, 12);
    expect(split[0].units).toBeCloseTo(units.estimate - baseUnits, 9);
    expect(units.upper).toBeGreaterThan(units.estimate);
  });
});

describe("a scenario refuses", () => {
  const refusal = (run: () => unknown) => {
    try {
      run();
    } catch (error) {
      if (error instanceof PlanningError) return { code: error.code, message: error.message };
      throw error;
    }
    return null;
  };

  it("a plan without cells", () => {
    expect(refusal(() => predictScenario({ stores: oneStore, cells: [], level }))).toEqual({
      code: "no-cells", message: "A scenario needs at least one store and one week.",
    });
  });

  it("a store without a model, a store with two, and a store-week given twice", () => {
    expect(refusal(() => predictOne({ store: "S9" }))).toEqual({
      code: "not-in-plan", message: "Store S9 has no model to predict it with.",
    });
    expect(refusal(() => prepareScenario([...oneStore, ...oneStore]))?.message).toBe("Each store of a scenario has one model.");
    expect(refusal(() => predictScenario({ stores: oneStore, cells: [aPlanCell(), aPlanCell()], level }))).toEqual({
      code: "cell-repeated", message: "Store S1, week 2026-06-08 comes twice in the plan.",
    });
  });

  it.each([
    [{ price: 0 }, "a price must be above zero, not 0"],
    [{ price: Number.NaN }, "a price must be above zero, not NaN"],
    [{ regularPrice: -1 }, "a regular price must be above zero, not -1"],
    [{ exposure: 0 }, "exposure must be above 0 and at most 1, not 0"],
    [{ exposure: 1.2 }, "exposure must be above 0 and at most 1, not 1.2"],
    [{ taxRate: -0.1 }, "a tax rate must not be below zero, not -0.1"],
    [{ temperatureC: null, normalTemperatureC: null }, "its model reads a temperature, and none is known"],
  ])("the value in %j", (changes, rule) => {
    expect(refusal(() => predictOne(changes))).toEqual({
      code: "unusable-value", message: `Store S1, week 2026-06-08: ${rule}.`,
    });
  });

  it("a level that is no probability", () => {
    expect(refusal(() => predictScenario({ stores: oneStore, cells: [aPlanCell()], level: 80 }))?.message).toBe(
      "An interval's level lies between 0 and 1, not at 80.",
    );
  });

  it("a model without a log link", () => {
    const { data } = toModelData(inventedWeeks({ store: "S1", seed: 21 }));
    const fitted = fitModel({ response: "units", family: "gaussian", terms: [] }, data);
    expect(refusal(() => prepareScenario([{ store: "S1", model: fitted }]))).toEqual({
      code: "no-log-link", message: "The model of store S1 adds units up instead of multiplying them: it cannot tell a lift.",
    });
  });
});
