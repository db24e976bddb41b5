import { screen, waitFor, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { Link, Outlet } from "react-router-dom";
import { afterEach, describe, expect, it, vi } from "vitest";
import type { Chain } from "@shared/contract/chain";
import type { NoticeChoices as Choices } from "@shared/contract/notices";
import { ChainSettings } from "@/features/settings/components/chain-settings";
import { NoticeChoices } from "@/features/settings/components/notice-choices";
import { currencyOptions, localeExample, localeOptions, timeZoneOptions } from "@/features/settings/view/chain-options";
import { weekChangeConsequences } from "@/features/settings/view/week-change";
import { answerRequests, refusal } from "./support/answer";
import { renderInPage } from "./support/render";
import { renderRoutes } from "./support/routed";

afterEach(() => vi.unstubAllGlobals());

const everything: Choices = { "extract-has-errors": true, "extract-loaded": true, "sales-missing": true };

/** A server that keeps what it is sent, unless it is told to refuse. */
const keeping = <Kept extends object>(kept: Kept, refuse?: () => ReturnType<typeof refusal> | undefined) => {
  const sent: Partial<Kept>[] = [];
  let state = kept;
  answerRequests((_address, { method, body }) => {
    if (method === "PUT") {
      const refused = refuse?.();
      if (refused) return refused;
      const change = JSON.parse(String(body)) as Partial<Kept>;
      sent.push(change);
      state = { ...state, ...change };
    }
    return { status: 200, body: state };
  });
  return sent;
};

describe("the notices page", () => {
  it("keeps each choice as it is made", async () => {
    const sent = keeping(everything);
    renderInPage(<NoticeChoices email="data@larkmoor.example" roles={["data-admin"]} />);
    await userEvent.click(await screen.findByRole("checkbox", { name: "Sales are loaded" }));
    expect(await screen.findByText("Your choice is kept.")).toBeTruthy();
    expect(sent).toEqual([{ ...everything, "extract-loaded": false }]);
    expect(screen.getByRole("checkbox", { name: "Sales are loaded" })).toHaveProperty("checked", false);
  });

  it("puts a choice back that the server did not take, and says so", async () => {
    keeping(everything, () => refusal(503, "The service is away."));
    renderInPage(<NoticeChoices email="data@larkmoor.example" roles={["data-admin"]} />);
    await userEvent.click(await screen.findByRole("checkbox", { name: /A file has errors/ }));
    expect(await screen.findByText(/Your choice was not kept/)).toBeTruthy();
    await waitFor(() => expect(screen.getByRole("checkbox", { name: /A file has errors/ })).toHaveProperty("checked", true));
  });

  it("offers a planner what can reach a planner", async () => {
    keeping(everything);
    renderInPage(<NoticeChoices email="planner@larkmoor.example" roles={["planner"]} />);
    expect(await screen.findAllByRole("checkbox")).toHaveLength(1);
  });
});

const chain: Chain = {
  name: "Larkmoor Grocers", currency: "EUR", locale: "en-GB", timeZone: "Europe/London", calendar: "iso", weekStart: 1, temperatureUnit: "celsius",
  intervalLevel: 0.8, uploadLimitBytes: 2 * 1024 ** 3, secondLookShare: 0.25, salesDueDay: 1, salesDueHour: 12,
};

const openSettings = async () => {
  const Frame = () => (
    <>
      <Link to="/elsewhere">Elsewhere</Link>
      <Outlet />
    </>
  );
  const pages = [{ path: "/settings", element: <ChainSettings /> }, { path: "/elsewhere", element: <p>Another page</p> }];
  renderRoutes([{ element: <Frame />, children: pages }], { at: "/settings" });
  await screen.findByRole("textbox", { name: "Name" });
};

const save = () => userEvent.click(screen.getByRole("button", { name: "Save settings" }));
const retype = async (name: string, text: string) => {
  const field = screen.getByRole("textbox", { name });
  await userEvent.clear(field);
  await userEvent.type(field, text);
};

describe("the chain's settings", () => {
  it("show what holds, and cannot be saved before something is changed", async () => {
    keeping(chain);
    await openSettings();
    expect(screen.getByRole("textbox", { name: "Level of intervals" })).toHaveProperty("value", "80 %");
    expect(screen.getByRole("textbox", { name: "Largest file" })).toHaveProperty("value", "2048 MB");
    expect(screen.getByRole("combobox", { name: "First day of the week" })).toHaveProperty("value", "1");
    expect(screen.getByRole("combobox", { name: "Currency" })).toHaveProperty("value", "Euro");
    expect(screen.getByRole("button", { name: "Save settings" })).toHaveProperty("disabled", true);
  });

  it("send what was changed and nothing else, in the contract's units", async () => {
    const sent = keeping(chain);
    await openSettings();
    await retype("Name", "Larkmoor");
    await retype("Second look from a change of", "30{Tab}");
    await retype("Largest file", "500{Tab}");
    await userEvent.selectOptions(screen.getByRole("combobox", { name: "By" }), "09:00");
    await save();
    expect(await screen.findByText("The settings are saved.")).toBeTruthy();
    expect(sent).toEqual([{ name: "Larkmoor", secondLookShare: 0.3, uploadLimitBytes: 500 * 1024 ** 2, salesDueHour: 9 }]);
    expect(screen.getByText("Everything is saved.")).toBeTruthy();
  });

  it("say what follows from other weeks before they are saved", async () => {
    keeping(chain);
    await openSettings();
    expect(screen.queryByText("If you save this")).toBeNull();
    await userEvent.selectOptions(screen.getByRole("combobox", { name: "First day of the week" }), "Thursday");
    expect(screen.getByText(/weeks that begin on Thursday from now on/)).toBeTruthy();
    await userEvent.selectOptions(screen.getByRole("combobox", { name: "First day of the week" }), "Monday");
    expect(screen.queryByText("If you save this")).toBeNull();
  });

  it("show what the server refuses at the field it is about", async () => {
    const message = "Weeks of the 4-5-4 calendar run Sunday to Saturday: they cannot begin on Monday.";
    keeping(chain, () => refusal(422, message, { errors: [{ path: "weekStart", message }] }));
    await openSettings();
    await userEvent.selectOptions(screen.getByRole("combobox", { name: "Calendar" }), "4-5-4");
    expect(screen.getByRole("combobox", { name: "First day of the week" })).toHaveProperty("value", "0");
    await userEvent.selectOptions(screen.getByRole("combobox", { name: "First day of the week" }), "Monday");
    await save();
    expect(await screen.findByText(message)).toBeTruthy();
    expect(screen.getByRole("combobox", { name: "First day of the week" }).getAttribute("aria-invalid")).toBe("true");
  });

  it("show what is wrong without asking the server where they can tell themselves", async () => {
    const sent = keeping(chain);
    await openSettings();
    await userEvent.clear(screen.getByRole("textbox", { name: "Name" }));
    await save();
    expect(await screen.findByText("Give the chain a name.")).toBeTruthy();
    expect(screen.getByRole("textbox", { name: "Name" }).getAttribute("aria-invalid")).toBe("true");
    expect(sent).toEqual([]);
  });

  it("say in a sentence what the server refuses for another reason, and keep what was typed", async () => {
    keeping(chain, () => refusal(503, "The database cannot be reached. Try again in a moment."));
    await openSettings();
    await retype("Name", "Larkmoor");
    await save();
    expect(within(await screen.findByRole("alert")).getByText("The database cannot be reached. Try again in a moment.")).toBeTruthy();
    expect(screen.getByRole("textbox", { name: "Name" })).toHaveProperty("value", "Larkmoor");
  });

  it("ask before changes are left behind, and not once they are discarded", async () => {
    keeping(chain);
    await openSettings();
    await retype("Name", "Larkmoor");
    await userEvent.click(screen.getByRole("link", { name: "Elsewhere" }));
    await userEvent.click(within(await screen.findByRole("dialog")).getByRole("button", { name: "Stay" }));
    expect(screen.getByRole("textbox", { name: "Name" })).toHaveProperty("value", "Larkmoor");
    await userEvent.click(screen.getByRole("button", { name: "Discard" }));
    expect(screen.getByRole("textbox", { name: "Name" })).toHaveProperty("value", "Larkmoor Grocers");
    await userEvent.click(screen.getByRole("link", { name: "Elsewhere" }));
    expect(await screen.findByText("Another page")).toBeTruthy();
  });
});

describe("the choices of settings", () => {
  it("hold the value in use even where it is none that we list", () => {
    expect(localeOptions("en-ZM")[0]).toMatchObject({ value: "en-ZM" });
    expect(timeZoneOptions("Etc/Nowhere")[0]).toMatchObject({ value: "Etc/Nowhere" });
    expect(currencyOptions("EUR").filter(({ value }) => value === "EUR")).toEqual([{ value: "EUR", label: "Euro", detail: "EUR" }]);
  });

  it("give an example of a language's writing, and none of what is no language", () => {
    expect(localeExample("de-DE", "EUR").replace(/\s/g, " ")).toBe("1.234,50 € on 08.06.2026");
    expect(localeExample("not a language", "EUR")).toBe("");
  });

  it("say nothing of weeks that stay, and each thing that follows from others", () => {
    expect(weekChangeConsequences(chain, chain)).toEqual([]);
    expect(weekChangeConsequences(chain, { calendar: "4-5-4", weekStart: 0 })).toHaveLength(3);
  });
});
