import { screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, describe, expect, it, vi } from "vitest";
import { IssueList } from "@/features/extracts/components/issues/issue-list";
import { loadedWeeksLine } from "@/features/extracts/view/loaded-weeks";
import { createChainFormat, neutralSettings } from "@/lib/format/chain-format";
import { answerRequests } from "./support/answer";
import { extractWith } from "./support/extract";
import { renderInPage } from "./support/render";

afterEach(() => vi.unstubAllGlobals());

const extract = extractWith({ rows: { read: 2, usable: 1, errors: 1, warnings: 0 }, layout: null });
const broken = { severity: "error", rule: "unknown-store", reason: "There is no store with this code", remedy: "Load it." };

describe("what is wrong with an extract", () => {
  it("says that there is no such rule where the address names none of the file, and leads back to all", async () => {
    answerRequests(() => ({ status: 200, body: { items: [], nextCursor: null, byRule: [{ ...broken, count: 1, listed: 1 }] } }));
    const onFilter = vi.fn();
    renderInPage(<IssueList extract={extract} filter={{ rule: "nonsense", severity: null }} onFilter={onFilter} />);
    expect(await screen.findByText("There is no rule “nonsense” here")).toBeTruthy();
    expect(screen.queryByRole("link", { name: "Save as CSV" })).toBeNull();
    await userEvent.click(screen.getByRole("button", { name: "Show all rules" }));
    expect(onFilter).toHaveBeenCalledWith({ rule: null, severity: null });
  });

  it("lists the rows of a rule that the file broke", async () => {
    const row = { ...broken, line: 3, column: "store", value: "Z9" };
    answerRequests(() => ({ status: 200, body: { items: [row], nextCursor: null, byRule: [{ ...broken, count: 1, listed: 1 }] } }));
    renderInPage(<IssueList extract={extract} filter={{ rule: "unknown-store", severity: null }} onFilter={vi.fn()} />);
    expect(await screen.findByRole("link", { name: "Save as CSV" })).toBeTruthy();
    expect(screen.queryByText(/There is no rule/)).toBeNull();
  });
});

describe("the line over the list of extracts", () => {
  const format = createChainFormat(neutralSettings);
  const weeks = { first: "2026-01-05", last: "2026-06-01", missing: [], expected: "2026-06-08", overdue: 0 };

  it("says which week is expected, and whether it has ended", () => {
    const loaded = "Sales are loaded to week 23, 2026. Expected next: week 24, 2026 (8–14 June 2026)";
    expect(loadedWeeksLine(weeks, format)).toBe(`${loaded}, which has not ended yet.`);
    expect(loadedWeeksLine({ ...weeks, overdue: 1 }, format)).toBe(`${loaded}, which has ended.`);
    expect(loadedWeeksLine({ ...weeks, overdue: 3 }, format)).toBe(`${loaded}; 3 weeks have ended that are not loaded.`);
    expect(loadedWeeksLine({ ...weeks, first: null, last: null, expected: null }, format)).toBeNull();
  });

  it("names the weeks missing in between, those that follow each other together, and counts what is beyond three", () => {
    const missing = ["2026-01-12", "2026-01-19", "2026-02-09", "2026-03-09", "2026-04-06", "2026-04-13"];
    const line = loadedWeeksLine({ ...weeks, missing }, format);
    expect(line).toContain("Missing in between: weeks 3–4, 2026; week 7, 2026; week 11, 2026; and 2 more weeks.");
    expect(loadedWeeksLine({ ...weeks, missing: missing.slice(0, 2) }, format)).toMatch(/Missing in between: weeks 3–4, 2026\.$/);
  });
});
