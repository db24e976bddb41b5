import { screen, waitFor } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, describe, expect, it, vi } from "vitest";
import type { Extract, ExtractChanges } from "@shared/contract/extracts";
import { ChangesStep } from "@/features/extracts/components/changes/changes-step";
import { LoadedStep } from "@/features/extracts/components/path/loaded-step";
import { UnknownCodes } from "@/features/extracts/components/unknown/unknown-codes";
import { answerRequests, refusal } from "./support/answer";
import { extractWith, sessionWith } from "./support/extract";
import { renderInPage } from "./support/render";

afterEach(() => vi.unstubAllGlobals());

const week = { week: "2026-06-08", new: 10, changed: 0, same: 0, missing: 0, unitsBefore: 0, unitsAfter: 120 };
const changes: ExtractChanges = { totals: { new: 10, changed: 0, same: 0, missing: 0 }, weeks: [week], secondLook: [] };
const jobId = "0b7e3a44-3b1b-4a8e-9a0a-000000000009";

const sentTo = (asked: ReturnType<typeof answerRequests>, end: string) => asked.mock.calls.find(([address]) => String(address).endsWith(end));
const bodyOf = (call: ReturnType<typeof sentTo>): unknown => JSON.parse(String(call?.[1]?.body));

describe("what loading changes", () => {
  const show = (answered: ExtractChanges, extract: Extract = extractWith(), load: { status: number; body?: unknown } = { status: 202, body: { jobId } }) => {
    const asked = answerRequests((address) => (address.endsWith("/load") ? load : { status: 200, body: address.endsWith("/changes") ? answered : extract }));
    renderInPage(<ChangesStep extract={extract} />);
    return asked;
  };

  it("is a table of weeks, and a button that loads all usable rows", async () => {
    const asked = show(changes);
    expect(await screen.findByText("10 new rows.")).toBeTruthy();
    expect(screen.getByRole("table", { name: "Changes by week" }).textContent).toContain("+120");
    await userEvent.click(screen.getByRole("button", { name: "Load 10 rows" }));
    expect(bodyOf(sentTo(asked, "/load"))).toEqual({ secondLook: false });
  });

  it("wants a second look where it is unusual, in so many words, and a tick before it loads", async () => {
    const asked = show({ ...changes, secondLook: ["Week 24, 2026: 100 units become 180, 80 % more."] });
    expect(await screen.findByText("Week 24, 2026: 100 units become 180, 80 % more.")).toBeTruthy();
    const load = screen.getByRole<HTMLButtonElement>("button", { name: "Load 10 rows" });
    expect(load.disabled).toBe(true);
    await userEvent.click(screen.getByLabelText("I have looked at this, and it is right"));
    await userEvent.click(load);
    expect(bodyOf(sentTo(asked, "/load"))).toEqual({ secondLook: true });
  });

  it("reads the reasons anew where the server asks for a second look that the page did not know of", async () => {
    const asked = show(changes, extractWith(), refusal(409, "Look at what is unusual first.", { code: "second-look-needed" }));
    await userEvent.click(await screen.findByRole("button", { name: "Load 10 rows" }));
    expect(await screen.findByText("Look at what is unusual first.")).toBeTruthy();
    await waitFor(() => expect(asked.mock.calls.filter(([address]) => String(address).endsWith("/changes")).length).toBeGreaterThan(1));
  });

  it("says that nothing would change", async () => {
    show({ totals: { new: 0, changed: 0, same: 10, missing: 0 }, weeks: [{ ...week, new: 0, same: 10, unitsBefore: 120 }], secondLook: [] });
    expect(await screen.findByText("Nothing would change: every row is there already.")).toBeTruthy();
    expect(screen.getByText("There is no need to: only the file would be marked as loaded.")).toBeTruthy();
  });

  it("says why it cannot be loaded", async () => {
    show(changes, extractWith({ may: { check: false, load: false, withdraw: false } }));
    expect(await screen.findByText("A data admin can load it.")).toBeTruthy();
    expect(screen.queryByRole("button", { name: /^Load/ })).toBeNull();
  });
});

describe("a loaded extract", () => {
  it("says what goes back before it is withdrawn", async () => {
    const extract = extractWith({ state: "loaded", loadedAt: "2026-06-15T09:00:00.000Z", may: { check: false, load: false, withdraw: true } });
    const asked = answerRequests((address) => ({ status: address.endsWith("/withdraw") ? 202 : 200, body: address.endsWith("/withdraw") ? { jobId } : address.endsWith("/changes") ? changes : extract }));
    renderInPage(<LoadedStep extract={extract} />);
    await userEvent.click(screen.getByRole("button", { name: "Withdraw" }));
    expect(await screen.findByText("The 10 rows it added are taken out.")).toBeTruthy();
    await userEvent.click(screen.getAllByRole("button", { name: "Withdraw", hidden: true })[1]);
    await waitFor(() => expect(sentTo(asked, "/withdraw")).toBeTruthy());
  });
});

describe("codes that the catalogue lacks", () => {
  const codes = {
    stores: ["S25", "S26"].map((code) => ({ code, rows: 18, firstWeek: "2026-06-01", lastWeek: "2026-06-01" })), storesTotal: 2,
    products: [{ code: "P9", rows: 1, firstWeek: null, lastWeek: null }], productsTotal: 1,
  };
  const show = (permissions: string[]) => {
    const asked = answerRequests((address, { method }) => {
      if (address.endsWith("/session")) return { status: 200, body: sessionWith(permissions) };
      if (address.endsWith("/unknown-codes")) return method === "POST" ? { status: 202, body: { jobId } } : { status: 200, body: codes };
      return { status: 200, body: { items: [] } };
    });
    const extract = extractWith({ rows: { read: 40, usable: 3, errors: 37, warnings: 0 } });
    const result = renderInPage(<UnknownCodes extract={extract} />);
    void result.queryClient.prefetchQuery({ queryKey: ["session"], queryFn: () => sessionWith(permissions) });
    return asked;
  };

  it("are entered with a name and a region, several at once, and the file is checked again", async () => {
    const asked = show(["read", "catalogue:write"]);
    expect(await screen.findByText("The file names 2 stores and 1 product that the catalogue does not have; 37 rows wait for them")).toBeTruthy();
    await userEvent.click(await screen.findByLabelText("Choose all stores"));
    await userEvent.type(screen.getByLabelText("Name of S25"), "Zawn Quay");
    await userEvent.click(screen.getByRole("button", { name: "Enter all 2 and check again" }));
    // Nothing is sent while something is wanting.
    expect(screen.getByText(/Each needs a name/)).toBeTruthy();
    expect(screen.getByLabelText("Name of S26").getAttribute("aria-invalid")).toBe("true");
    await userEvent.type(screen.getByLabelText("Name of S26"), "Gorse Head");
    await userEvent.type(screen.getByLabelText("Region for all 2 that are chosen"), "Coast");
    await userEvent.click(screen.getByRole("button", { name: "Enter all 2 and check again" }));
    await waitFor(() => expect(asked.mock.calls.some(([, options]) => options?.method === "POST")).toBe(true));
    const post = asked.mock.calls.find(([, options]) => options?.method === "POST");
    expect(bodyOf(post)).toEqual({
      stores: [{ code: "S25", name: "Zawn Quay", region: "Coast" }, { code: "S26", name: "Gorse Head", region: "Coast" }], products: [],
    });
  });

  it("are left to a data admin by those who may not enter them", async () => {
    show(["read"]);
    expect(await screen.findByText(/A data admin can enter them here/)).toBeTruthy();
    expect(screen.queryByLabelText("Name of S25")).toBeNull();
  });
});
