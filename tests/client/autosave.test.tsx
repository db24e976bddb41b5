import { QueryClientProvider } from "@tanstack/react-query";
import { act, renderHook } from "@testing-library/react";
import type { ReactNode } from "react";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import type { Scenario } from "@shared/contract/scenarios";
import { useAutosave } from "@/features/scenarios/hooks/use-autosave";
import { editOf } from "@/features/scenarios/view/scenario-draft";
import { createQueryClient } from "@/lib/query-client";
import { answerRequests, refusal } from "./support/answer";

beforeEach(() => void vi.useFakeTimers());
afterEach(() => {
  vi.useRealTimers();
  vi.unstubAllGlobals();
});

const person = { id: "0b7e3a44-3b1b-4a8e-9a0a-000000000001", name: "Ada Kale" };
const scenario: Scenario = {
  id: "0b7e3a44-3b1b-4a8e-9a0a-000000000002",
  name: "Midsummer lemonade",
  product: "P101",
  stores: ["S01"],
  weeks: { first: "2026-06-08", last: "2026-06-08" },
  cells: [],
  fixedCost: 0,
  modelId: "0b7e3a44-3b1b-4a8e-9a0a-000000000003",
  model: { id: "0b7e3a44-3b1b-4a8e-9a0a-000000000003", fittedAt: "2026-05-30T08:00:00.000Z", state: "in-use" },
  state: "draft",
  version: 1,
  createdBy: person,
  createdAt: "2026-06-01T08:00:00.000Z",
  updatedBy: person,
  updatedAt: "2026-06-01T08:00:00.000Z",
  may: { edit: true },
};

const asOpened = editOf(scenario);

const start = () => {
  const queryClient = createQueryClient();
  const page = ({ children }: { children: ReactNode }) => (
    <QueryClientProvider client={queryClient}>{children}</QueryClientProvider>
  );
  return renderHook(({ edit }) => useAutosave({ scenario, edit, enabled: true }), {
    wrapper: page,
    initialProps: { edit: asOpened },
  });
};

const pass = (ms: number) => act(() => vi.advanceTimersByTimeAsync(ms));

describe("a scenario that is worked on", () => {
  it("is saved a moment after the last change", async () => {
    const saved = { ...scenario, name: "Second", version: 2, updatedAt: "2026-06-01T08:05:00.000Z" };
    const asked = answerRequests(() => ({ status: 200, body: saved, headers: { ETag: '"2"' } }));
    const { result, rerender } = start();
    rerender({ edit: { ...asOpened, name: "First" } });
    await pass(700);
    rerender({ edit: { ...asOpened, name: "Second" } });
    expect(result.current.state).toEqual({ kind: "waiting" });
    await pass(700);
    expect(asked).not.toHaveBeenCalled();
    await pass(200);
    expect(asked).toHaveBeenCalledTimes(1);
    expect(result.current.state).toEqual({ kind: "saved", at: saved.updatedAt });
  });

  it("counts as saved again once a change is undone before it was sent", async () => {
    const asked = answerRequests(() => "no answer");
    const { result, rerender } = start();
    rerender({ edit: { ...asOpened, fixedCost: 5 } });
    expect(result.current.state).toEqual({ kind: "waiting" });
    rerender({ edit: asOpened });
    await pass(2000);
    expect(result.current.state).toEqual({ kind: "saved", at: scenario.updatedAt });
    expect(asked).not.toHaveBeenCalled();
  });

  it("counts as saved again once a change that could not be saved is undone, and saves the next one", async () => {
    const next = { ...scenario, fixedCost: 7, version: 2, updatedAt: "2026-06-01T08:06:00.000Z" };
    let isDown = true;
    answerRequests(() => (isDown ? refusal(422, "No such price.") : { status: 200, body: next }));
    const { result, rerender } = start();
    rerender({ edit: { ...asOpened, fixedCost: 5 } });
    await pass(1000);
    expect(result.current.state).toEqual({ kind: "failed", detail: "No such price." });
    rerender({ edit: asOpened });
    await pass(2000);
    expect(result.current.state).toEqual({ kind: "saved", at: scenario.updatedAt });
    isDown = false;
    rerender({ edit: { ...asOpened, fixedCost: 7 } });
    await pass(1000);
    expect(result.current.state).toEqual({ kind: "saved", at: next.updatedAt });
  });

  it("sends an undone change again where the server had not answered, since it may hold the change", async () => {
    const again = { ...scenario, version: 2, updatedAt: "2026-06-01T08:07:00.000Z" };
    let isDown = true;
    const asked = answerRequests(() => (isDown ? "no answer" : { status: 200, body: again }));
    const { result, rerender } = start();
    rerender({ edit: { ...asOpened, fixedCost: 5 } });
    await pass(1000);
    expect(result.current.state.kind).toBe("failed");
    isDown = false;
    rerender({ edit: asOpened });
    expect(result.current.state).toEqual({ kind: "waiting" });
    await pass(1000);
    expect(result.current.state).toEqual({ kind: "saved", at: again.updatedAt });
    expect(JSON.parse(String(asked.mock.lastCall?.[1]?.body))).toMatchObject({ fixedCost: 0 });
  });

  it("keeps saying what went wrong while the change that could not be saved stands", async () => {
    answerRequests(() => "no answer");
    const { result, rerender } = start();
    rerender({ edit: { ...asOpened, fixedCost: 5 } });
    await pass(5000);
    expect(result.current.state.kind).toBe("failed");
  });
});
