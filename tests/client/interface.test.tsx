import { screen, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { useState } from "react";
import { describe, expect, it, vi } from "vitest";
import type { Job } from "@shared/contract/jobs";
import { Combobox } from "@/components/ui/combobox";
import { matchOptions } from "@/components/ui/combobox-options";
import { DataTable } from "@/components/ui/data-table";
import { sumOf } from "@/components/ui/data-table-columns";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { NumberField } from "@/components/ui/number-field";
import { ErrorState } from "@/components/ui/error-state";
import { JobProgress } from "@/components/jobs/job-progress";
import { ProgressBar } from "@/components/ui/progress-bar";
import { Term } from "@/components/ui/term";
import { Button } from "@/components/ui/button";
import { ApiError } from "@/lib/api-error";
import { chooseTheme, readThemeChoice } from "@/lib/theme";
import { renderInPage } from "./support/render";

type Row = { id: string; name: string; units: number | null };

const columns: TableColumn<Row>[] = [
  { id: "name", header: "Store", value: (row) => row.name },
  {
    id: "units",
    header: "Units",
    value: (row) => row.units,
    align: "right",
    total: (rows) => `sum ${sumOf(rows, (row) => row.units)}`,
  },
];
const rows: Row[] = [
  { id: "a", name: "Store 10", units: 3 },
  { id: "b", name: "Store 9", units: null },
  { id: "c", name: "Ashgill", units: 40 },
];

const shownNames = () =>
  screen
    .getAllByRole("row")
    .slice(1)
    .map((row) => within(row).queryAllByRole("cell")[0]?.textContent);

describe("a table", () => {
  it("sorts numbers by size with missing ones last either way, and says how it is sorted", async () => {
    renderInPage(<DataTable caption="Stores" rows={rows} columns={columns} rowKey={(row) => row.id} />);
    const heading = screen.getByRole("columnheader", { name: "Units" });
    await userEvent.click(within(heading).getByRole("button"));
    const first = heading.getAttribute("aria-sort");
    const once = shownNames().slice(0, 3);
    await userEvent.click(within(heading).getByRole("button"));
    const twice = shownNames().slice(0, 3);
    expect(new Set([first, heading.getAttribute("aria-sort")])).toEqual(new Set(["ascending", "descending"]));
    expect([once, twice]).toContainEqual(["Store 10", "Ashgill", "Store 9"]);
    expect([once, twice]).toContainEqual(["Ashgill", "Store 10", "Store 9"]);
  });

  it("sorts names as people do, nine before ten", () => {
    renderInPage(
      <DataTable
        caption="Stores"
        rows={rows}
        columns={columns}
        rowKey={(row) => row.id}
        initialSort={{ column: "name", descending: false }}
      />,
    );
    expect(shownNames().slice(0, 3)).toEqual(["Ashgill", "Store 9", "Store 10"]);
  });

  it("totals what it shows, without the row that leads", () => {
    renderInPage(
      <DataTable
        caption="Stores"
        rows={rows}
        columns={columns}
        rowKey={(row) => row.id}
        leadRow={{ id: "chain", name: "Chain", units: 1000 }}
      />,
    );
    expect(screen.getByText("sum 43")).toBeTruthy();
    expect(shownNames()[0]).toBe("Chain");
  });

  it("keeps only the rows in view in the page when there are thousands", () => {
    // Nothing has a size here; rows in view are told from the height of what scrolls.
    vi.spyOn(Element.prototype, "clientHeight", "get").mockReturnValue(600);
    vi.spyOn(Element.prototype, "clientWidth", "get").mockReturnValue(800);
    const many = Array.from({ length: 5000 }, (_, index) => ({
      id: String(index),
      name: `Store ${index}`,
      units: index,
    }));
    renderInPage(<DataTable caption="Stores" rows={many} columns={columns} rowKey={(row) => row.id} />);
    expect(screen.getByRole("table").getAttribute("aria-rowcount")).toBe("5001");
    const drawn = document.querySelectorAll("tr[data-row]").length;
    expect(drawn).toBeGreaterThan(5);
    expect(drawn).toBeLessThan(80);
    vi.restoreAllMocks();
  });
});

describe("finding one of many", () => {
  const options = [
    { value: "P1", label: "Pennyfold Lemonade 1.5 L", detail: "Soft drinks" },
    { value: "P2", label: "Crème caramel", detail: "Desserts" },
    { value: "P3", label: "Old lemon cake", detail: "Bakery" },
  ];

  it("needs every word typed, whatever the accents, and puts beginnings first", () => {
    expect(matchOptions(options, "lemon").map(({ value }) => value)).toEqual(["P1", "P3"]);
    expect(matchOptions(options, "creme").map(({ value }) => value)).toEqual(["P2"]);
    expect(matchOptions(options, "old").map(({ value }) => value)).toEqual(["P3", "P1"]);
    expect(matchOptions(options, "soft 1.5").map(({ value }) => value)).toEqual(["P1"]);
  });

  const Chooser = ({ onChange }: { onChange: (value: string) => void }) => {
    const [value, setValue] = useState("P1");
    const choose = (next: string) => {
      onChange(next);
      setValue(next);
    };
    return <Combobox label="Product" options={options} value={value} onChange={choose} />;
  };

  it("works by keyboard alone and shows what was chosen", async () => {
    const onChange = vi.fn();
    renderInPage(<Chooser onChange={onChange} />);
    const field = screen.getByRole<HTMLInputElement>("combobox", { name: "Product" });
    expect(field.value).toBe("Pennyfold Lemonade 1.5 L");
    await userEvent.type(field, "cake");
    expect(screen.getAllByRole("option")).toHaveLength(1);
    await userEvent.keyboard("{Enter}");
    expect(onChange).toHaveBeenCalledWith("P3");
    expect(field.value).toBe("Old lemon cake");
  });

  it("is left unchanged by Escape", async () => {
    const onChange = vi.fn();
    renderInPage(<Chooser onChange={onChange} />);
    await userEvent.type(screen.getByRole("combobox"), "cake{Escape}");
    expect(onChange).not.toHaveBeenCalled();
    expect(screen.queryByRole("listbox")).toBeNull();
    expect(screen.getByRole<HTMLInputElement>("combobox").value).toBe("Pennyfold Lemonade 1.5 L");
  });
});

describe("fields, states and words", () => {
  it("a number field keeps to its range and ignores what is no number", async () => {
    const onChange = vi.fn();
    renderInPage(<NumberField label="Anchor price" value={1.79} min={1} max={2} step={0.05} onChange={onChange} />);
    const field = screen.getByRole("textbox", { name: "Anchor price" });
    await userEvent.clear(field);
    await userEvent.type(field, "9{Enter}");
    await userEvent.clear(field);
    await userEvent.type(field, "cheap{Enter}");
    await userEvent.type(field, "{ArrowUp}");
    expect(onChange.mock.calls.map(([value]) => value)).toEqual([2, 1.84]);
  });

  it("an error says what happened, the id to quote, and tries again", async () => {
    const onRetry = vi.fn();
    const error = new ApiError({ status: 500, code: "x", detail: "Something went wrong.", requestId: "req-7" });
    renderInPage(<ErrorState title="The extracts could not be read" error={error} onRetry={onRetry} />);
    expect(screen.getByRole("alert").textContent).toContain("req-7");
    await userEvent.click(screen.getByRole("button", { name: "Try again" }));
    expect(onRetry).toHaveBeenCalledOnce();
  });

  it("progress of unknown length claims no percentage", () => {
    renderInPage(<ProgressBar label="Checking" share={null} note="61,204 rows read" />);
    expect(screen.getByRole("progressbar").getAttribute("aria-valuenow")).toBeNull();
    expect(screen.getByText("61,204 rows read")).toBeTruthy();
  });

  it("work that waits for its turn shows an empty bar, and says so once", () => {
    const job: Job = {
      id: "0b7e3a44-3b1b-4a8e-9a0a-000000000009",
      kind: "check",
      state: "queued",
      progress: { done: 0, total: null, message: "" },
      subject: null,
      result: null,
      error: null,
      attempt: 0,
      createdAt: "2026-06-01T08:00:00.000Z",
      startedAt: null,
      finishedAt: null,
    };
    renderInPage(<JobProgress job={job} updatedAtMs={0} label="Checking the rows" />);
    expect(screen.getByRole("progressbar").getAttribute("aria-valuenow")).toBe("0");
    expect(screen.getByRole("progressbar").firstElementChild).toMatchObject({ style: { width: "0%" } });
    expect(screen.getAllByText(/wait/i)).toHaveLength(1);
  });

  it("a trade word tells its meaning on focus and hides it on Escape", async () => {
    renderInPage(<Term meaning="Units the same week would have sold without promotion.">base</Term>);
    await userEvent.tab();
    expect(screen.getByText("Units the same week would have sold without promotion.")).toBeTruthy();
    await userEvent.keyboard("{Escape}");
    expect(screen.queryByText("Units the same week would have sold without promotion.")).toBeNull();
  });

  it("a busy button keeps its focus and takes no second press", async () => {
    const onClick = vi.fn();
    renderInPage(
      <Button busy onClick={onClick}>
        Load
      </Button>,
    );
    const button = screen.getByRole("button", { name: "Load" });
    button.focus();
    await userEvent.keyboard("{Enter}");
    expect(onClick).not.toHaveBeenCalled();
    expect(document.activeElement).toBe(button);
  });
});

describe("the theme", () => {
  it("is a person's own choice until they leave it to the system again", () => {
    chooseTheme("dark");
    expect([readThemeChoice(), localStorage.getItem("shelftide-theme")]).toEqual(["dark", "dark"]);
    chooseTheme("system");
    expect([readThemeChoice(), localStorage.getItem("shelftide-theme")]).toEqual(["system", null]);
  });
});
