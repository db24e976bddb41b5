import { screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, describe, expect, it, vi } from "vitest";
import type { FitSummary, Model } from "@shared/contract/drivers";
import type { Scenario } from "@shared/contract/scenarios";
import { ScenarioHead } from "@/features/scenarios/components/scenario-head";
import { useScenarioEdit } from "@/features/scenarios/hooks/use-scenario-edit";
import { modelOffer } from "@/features/scenarios/view/model-offer";
import { answerRequests } from "./support/answer";
import { renderInPage } from "./support/render";

afterEach(() => vi.unstubAllGlobals());

const own = "0b7e3a44-3b1b-4a8e-9a0a-000000000003";
const other = "0b7e3a44-3b1b-4a8e-9a0a-000000000004";
const person = { id: "0b7e3a44-3b1b-4a8e-9a0a-000000000001", name: "Ada Kale" };
const scenario: Scenario = {
  id: "0b7e3a44-3b1b-4a8e-9a0a-000000000002",
  name: "Midsummer lemonade",
  product: "P101",
  stores: ["S01", "S02"],
  weeks: { first: "2026-06-08", last: "2026-06-08" },
  cells: [],
  fixedCost: 0,
  modelId: own,
  model: { id: own, fittedAt: "2026-05-30T08:00:00.000Z", state: "retired" },
  state: "draft",
  version: 1,
  createdBy: person,
  createdAt: "2026-06-01T08:00:00.000Z",
  updatedBy: person,
  updatedAt: "2026-06-01T08:00:00.000Z",
  may: { edit: true },
};
const fit = (store: string): FitSummary => ({
  store,
  rows: 100,
  firstWeek: "2024-01-01",
  lastWeek: "2025-11-24",
  devianceExplained: 0.9,
  dispersion: 1,
  edf: 8,
  converged: true,
  warnings: [],
  stockOuts: { leftOut: 0, partly: 0 },
  leftOut: [],
  straightLines: [],
  priceLearning: { weeksMoved: 12, regularPrices: 5, enough: true },
  meanWeeklyUnits: 10,
  meanBaseUnits: 9,
});
const inUse: Model = {
  id: other,
  product: "P101",
  state: "in-use",
  spec: null,
  createdAt: "2026-06-05T08:00:00.000Z",
  createdBy: "Ivo Rusk",
  jobId: null,
  usedFrom: "2026-06-05T09:00:00.000Z",
  usedUntil: null,
  fits: [fit("S01")],
  newerWeeks: 0,
  skipped: [],
  notForPlans: null,
  may: { use: false },
};

const Head = ({ scenario: shown }: { scenario: Scenario }) => {
  const editing = useScenarioEdit(shown);
  return (
    <>
      <ScenarioHead
        scenario={shown}
        product={undefined}
        editing={editing}
        saving={{ state: { kind: "saved", at: shown.updatedAt }, retry: vi.fn() }}
        level={0.8}
        levels={[0.8]}
        onLevel={vi.fn()}
      />
      <output>{editing.edit.modelId}</output>
    </>
  );
};

const answerWith = (models: Model[]) =>
  answerRequests((address) =>
    address.includes("/api/models") ? { status: 200, body: { items: models } } : { status: 401 },
  );

describe("a scenario's model", () => {
  it("is named by the date of its fit, and nothing is asked or offered while it is in use", () => {
    const asked = answerWith([inUse]);
    renderInPage(<Head scenario={{ ...scenario, model: { ...scenario.model, state: "in-use" } }} />);
    expect(screen.getByText(/^model fitted 30 May 2026/)).toBeTruthy();
    expect(asked.mock.calls.filter(([address]) => String(address).includes("/api/models"))).toEqual([]);
  });

  it("stays until a person takes the one in use, which can be undone", async () => {
    answerWith([inUse]);
    renderInPage(<Head scenario={scenario} />);
    expect(await screen.findByText(/Another model is in use now, fitted 5 Jun 2026/)).toBeTruthy();
    expect(screen.getByText(/The other knows 1 of its 2 stores\./)).toBeTruthy();
    expect(document.querySelector("output")?.textContent).toBe(own);
    await userEvent.click(screen.getByRole("button", { name: "Take the model in use" }));
    expect(document.querySelector("output")?.textContent).toBe(other);
    expect(screen.queryByText(/Another model is in use now/)).toBeNull();
    await userEvent.click(screen.getByRole("button", { name: "Undo (Ctrl Z)" }));
    expect(document.querySelector("output")?.textContent).toBe(own);
    expect(screen.getByRole("button", { name: "Take the model in use" })).toBeTruthy();
  });

  it("is not exchanged for one that knows none of the stores, nor by who may only read", async () => {
    answerWith([{ ...inUse, fits: [] }]);
    const { unmount } = renderInPage(<Head scenario={scenario} />);
    expect(await screen.findByText(/The other knows none of its stores\./)).toBeTruthy();
    expect(screen.queryByRole("button", { name: "Take the model in use" })).toBeNull();
    unmount();
    answerWith([inUse]);
    renderInPage(<Head scenario={{ ...scenario, may: { edit: false } }} />);
    expect(await screen.findByText(/Another model is in use now/)).toBeTruthy();
    expect(screen.queryByRole("button", { name: "Take the model in use" })).toBeNull();
  });

  it("is no offer to itself, nor where none is in use", () => {
    expect(modelOffer(scenario, { modelId: other, inUse })).toBeNull();
    expect(modelOffer(scenario, { modelId: own, inUse: null })).toBeNull();
  });
});
