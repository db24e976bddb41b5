import { screen, waitFor, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, describe, expect, it, vi } from "vitest";
import type { Layout } from "@shared/contract/layouts";
import type { ExtractLayout, LayoutPreview } from "@shared/contract/saved-layouts";
import { defaultWords } from "@shared/layouts";
import { LayoutEditor } from "@/features/extracts/components/reading/layout-editor";
import { ReadingStep } from "@/features/extracts/components/reading/reading-step";
import { answerRequests, refusal } from "./support/answer";
import { extractWith, sessionWith } from "./support/extract";
import { renderInPage } from "./support/render";

afterEach(() => vi.unstubAllGlobals());

const layout: Layout = {
  kind: "sales", encoding: "utf-8", separator: ";", linesAbove: 0, hasHeader: true, theirColumns: ["Date", "Shop", "Takings"],
  decimal: ",", thousands: "", dateOrder: "dmy", weekDay: "last", mapping: { week: { from: "name", name: "Date" } },
  words: defaultWords, missingMeans: "unknown", tax: "included",
};

const previewOf = (part: Partial<LayoutPreview> = {}): LayoutPreview => ({
  fileColumns: [
    { name: "Date", position: 0, samples: ["03/04/2026"], proposed: "week", why: "A usual name for it", confidence: 0.9 },
    { name: "Shop", position: 1, samples: ["S01"], proposed: null, why: "Neither its name nor its values say what it is" },
    { name: "Takings", position: 2, samples: ["12,50"], proposed: null, why: "Neither its name nor its values say what it is" },
  ],
  columns: ["week"],
  rows: [{ line: 2, fields: ["03/04/2026", "S01", "12,50"], values: ["2026-03-28"], problems: [] }],
  warnings: [{ code: "dates-ambiguous", message: "No date tells whether the day or the month comes first." }],
  missing: ["store"],
  ...part,
});

const start: ExtractLayout = { layout, origin: "proposed", saved: null, isConfirmed: false, preview: previewOf() };
const extract = extractWith({ fileName: "north-tills.csv", layout: { origin: "proposed", id: null, name: null, isConfirmed: false } });

/** The editor waits for a pause before it asks. */
const patience = { timeout: 5000 };
const bodyOf = (options: RequestInit | undefined) => JSON.parse(String(options?.body)) as { layout: Layout; saveAs?: string };

describe("the mapping editor", () => {
  it("shows the file's rows under what each column becomes, says why, and what is still needed", () => {
    answerRequests(() => "no answer");
    renderInPage(<LayoutEditor extract={extract} start={start} />);
    const rows = screen.getByRole("region", { name: "The file\u2019s first rows as they stand" });
    expect(within(rows).getByText("12,50")).toBeTruthy();
    expect(screen.getByLabelText<HTMLSelectElement>("What Date becomes").value).toBe("week");
    expect(within(rows).getByText("likely")).toBeTruthy();
    expect(screen.getByText(/Still needed: Store/)).toBeTruthy();
    expect(screen.getByText("\u201c03/04/2026\u201d is 3 April 2026")).toBeTruthy();
    // A warning stands beside the setting that it speaks of.
    expect(screen.getByLabelText("Days are written as").getAttribute("aria-describedby")).toBeTruthy();
    expect(screen.getByText("No date tells whether the day or the month comes first.")).toBeTruthy();
    expect(screen.getByRole<HTMLButtonElement>("button", { name: /^Use this/ }).disabled).toBe(true);
  });

  it("asks for the rows anew as the mapping changes, and keeps it under the source's name", async () => {
    const whole = previewOf({
      columns: ["week", "store"], missing: [],
      rows: [{ line: 2, fields: ["03/04/2026", "S01", "12,50"], values: ["2026-03-28", "S01"], problems: [] }],
    });
    const asked = answerRequests((address, { method }) => ({ status: method === "PUT" ? 202 : 200, body: address.endsWith("/preview") ? whole : method === "PUT" ? { jobId: extract.id } : {} }));
    renderInPage(<LayoutEditor extract={extract} start={start} />);
    await userEvent.selectOptions(screen.getByLabelText("What Shop becomes"), "store");
    await screen.findByText("All of the first 1 rows can be read.", {}, patience);
    const preview = asked.mock.calls.find(([address]) => String(address).endsWith("/layout/preview"));
    expect(bodyOf(preview?.[1]).layout.mapping.store).toEqual({ from: "name", name: "Shop" });
    const use = await screen.findByRole("button", { name: "Use this and save it as \u201cNorth tills\u201d" });
    await waitFor(() => expect((use as HTMLButtonElement).disabled).toBe(false));
    await userEvent.click(use);
    const put = asked.mock.calls.find(([, options]) => options?.method === "PUT");
    expect(bodyOf(put?.[1])).toMatchObject({ saveAs: "North tills", layout: { mapping: { store: { from: "name", name: "Shop" } } } });
  });

  it("finds the columns anew where the file is read in another writing", async () => {
    const commas = previewOf({
      fileColumns: [{ name: "Date;Shop;Takings", position: 0, samples: [], proposed: null, why: "Unknown" }], columns: [], missing: ["week", "store"],
    });
    const asked = answerRequests(() => ({ status: 200, body: commas }));
    renderInPage(<LayoutEditor extract={extract} start={start} />);
    await userEvent.selectOptions(screen.getByLabelText("Values are set apart by"), ",");
    await screen.findByLabelText("What Date;Shop;Takings becomes", {}, patience);
    expect(bodyOf(asked.mock.calls[0]?.[1]).layout).toMatchObject({ separator: ",", mapping: {}, theirColumns: [""] });
    await userEvent.click(screen.getByRole("button", { name: "Back to how it was" }));
    expect(screen.getByLabelText("What Shop becomes")).toBeTruthy();
  });

  it("asks for a word that no list explains, and marks its row", async () => {
    const withWord: ExtractLayout = {
      ...start,
      layout: { ...layout, mapping: { ...layout.mapping, promotion: { from: "name", name: "Shop" } } },
      preview: previewOf({
        columns: ["week", "feature", "display", "mechanic"], missing: [],
        rows: [{ line: 2, fields: [], values: ["2026-03-28", "", "", ""], problems: [{ column: "feature", value: "gondola", reason: "The word is in none of the lists" }] }],
      }),
    };
    const asked = answerRequests(() => ({ status: 200, body: withWord.preview }));
    renderInPage(<LayoutEditor extract={extract} start={withWord} />);
    expect(screen.getByText("In 1 of the first 1 rows a value cannot be read so; it is marked.")).toBeTruthy();
    await userEvent.selectOptions(screen.getByLabelText(/\u201cgondola\u201d as promotion in one word means/), "display");
    await waitFor(() => expect(asked).toHaveBeenCalled());
    expect(bodyOf(asked.mock.calls[0]?.[1]).layout.words.display).toContain("gondola");
  });

  it("says at once what cannot be: one sign for decimals and thousands", async () => {
    answerRequests(() => ({ status: 200, body: previewOf() }));
    renderInPage(<LayoutEditor extract={extract} start={start} />);
    await userEvent.selectOptions(screen.getByLabelText("Thousands are set apart by"), ",");
    expect(screen.getByText("Decimals and thousands cannot have the same sign.")).toBeTruthy();
  });

  it("says what the server refuses", async () => {
    const ready = { ...start, preview: previewOf({ missing: [] }) };
    answerRequests(() => refusal(409, "This file is being loaded.", { code: "in-work" }));
    renderInPage(<LayoutEditor extract={extract} start={ready} />);
    await userEvent.click(screen.getByRole("button", { name: /^Use this/ }));
    expect(await screen.findByText("This file is being loaded.")).toBeTruthy();
  });
});

describe("how a file is read", () => {
  const answer = (own: ExtractLayout, permissions: string[]) =>
    answerRequests((address) => ({ status: 200, body: address.endsWith("/session") ? sessionWith(permissions) : own }));

  it("is one line where it was recognised, with a way to read it otherwise", async () => {
    const saved: ExtractLayout = { ...start, origin: "saved", saved: { id: extract.id, name: "North tills" }, isConfirmed: true };
    answer(saved, ["read", "extracts:write"]);
    const recognised = extractWith({ layout: { origin: "saved", id: extract.id, name: "North tills", isConfirmed: true } });
    renderInPage(<ReadingStep extract={recognised} />);
    expect(await screen.findByText(/Its columns are those of \u201cNorth tills\u201d/)).toBeTruthy();
    await userEvent.click(await screen.findByRole("button", { name: "Read it another way" }));
    expect(screen.getByLabelText("What Date becomes")).toBeTruthy();
    await userEvent.click(screen.getByRole("button", { name: "Leave it as it is" }));
    expect(screen.queryByLabelText("What Date becomes")).toBeNull();
  });

  it("is shown, but not to be set, to those who may not", async () => {
    answer(start, ["read"]);
    renderInPage(<ReadingStep extract={extract} />);
    expect(await screen.findByText(/a data admin has to say that it is right/)).toBeTruthy();
    expect(screen.queryByRole("button", { name: /Use this|another way/ })).toBeNull();
  });
});
