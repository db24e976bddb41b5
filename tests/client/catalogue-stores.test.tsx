import { screen, waitFor, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, describe, expect, it, vi } from "vitest";
import { StoresPage } from "@/features/catalogue/components/stores-page";
import { refusal } from "./support/answer";
import { serving, stores } from "./support/catalogue-server";
import { renderRouted } from "./support/routed";

afterEach(() => vi.unstubAllGlobals());

const dialog = () => within(screen.getByRole("dialog"));

describe("the stores of the catalogue", () => {
  it("are found by words and region, and the address holds what was looked for", async () => {
    serving();
    const { router } = renderRouted(<StoresPage />, { at: "/stores?region=coast" });
    expect(await screen.findByRole("button", { name: "Harbour Street" })).toBeTruthy();
    expect(screen.queryByRole("button", { name: "Mill Lane" })).toBeNull();
    await userEvent.selectOptions(screen.getByLabelText("Region"), "");
    await userEvent.type(screen.getByLabelText("Code or name"), "mill");
    await waitFor(() => expect(screen.queryByRole("button", { name: "Harbour Street" })).toBeNull());
    expect(router.state.location.search).toBe("?q=mill");
    await userEvent.type(screen.getByLabelText("Code or name"), "x");
    expect(await screen.findByText("No store is like that")).toBeTruthy();
  });

  it("are changed from the version that was read, and it is said", async () => {
    const sent = serving();
    renderRouted(<StoresPage />);
    await userEvent.click(await screen.findByRole("button", { name: "Harbour Street" }));
    await userEvent.clear(dialog().getByLabelText("Name"));
    await userEvent.type(dialog().getByLabelText("Name"), "Harbour Road");
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await screen.findByText("Harbour Road is saved.")).toBeTruthy();
    expect(sent).toMatchObject([{
      method: "PUT", address: "/api/stores/S1", headers: { "If-Match": '"one"' }, body: { name: "Harbour Road", region: "coast", opened: "2015-03-02", closed: null },
    }]);
    expect(screen.queryByRole("dialog")).toBeNull();
  });

  it("say at the field what is wrong, before and after sending", async () => {
    serving({ refuse: () => refusal(409, "There is a store with the code S1 already.", { errors: [{ path: "code", message: "There is a store with the code S1 already." }] }) });
    renderRouted(<StoresPage />);
    await userEvent.click(await screen.findByRole("button", { name: "Enter a store" }));
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await dialog().findByText("A code is needed.")).toBeTruthy();
    await userEvent.type(dialog().getByLabelText("Code"), "S1");
    await userEvent.type(dialog().getByLabelText("Name"), "Shore Road");
    await userEvent.type(dialog().getByLabelText("Region"), "coast");
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await dialog().findByText("There is a store with the code S1 already.")).toBeTruthy();
    expect(dialog().getByLabelText("Code").getAttribute("aria-invalid")).toBe("true");
  });

  it("keep what was typed where someone was quicker, show the rest as it is now, and save over that", async () => {
    let isOutdated = true;
    const sent = serving({
      refuse: () => (isOutdated ? refusal(412, "Ada Kale changed store S1.", { code: "changed-meanwhile" }) : undefined),
      answers: { "/api/stores": () => ({ items: sent.length === 0 ? stores : [{ ...stores[0], region: "bay", version: "newer" }, stores[1]] }) },
    });
    renderRouted(<StoresPage />);
    await userEvent.click(await screen.findByRole("button", { name: "Harbour Street" }));
    await userEvent.type(dialog().getByLabelText("Name"), "!");
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await dialog().findByText(/Ada Kale changed store S1\. What you have changed still stands/)).toBeTruthy();
    await waitFor(() => expect(dialog().getByLabelText("Region")).toHaveProperty("value", "bay"));
    expect(dialog().getByLabelText("Name")).toHaveProperty("value", "Harbour Street!");
    isOutdated = false;
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await screen.findByText("Harbour Street! is saved.")).toBeTruthy();
    expect(sent[1]).toMatchObject({ headers: { "If-Match": '"newer"' }, body: { name: "Harbour Street!", region: "bay" } });
  });

  it("ask before changes are lost, and go where nothing was changed", async () => {
    serving();
    renderRouted(<StoresPage />);
    await userEvent.click(await screen.findByRole("button", { name: "Mill Lane" }));
    await userEvent.type(dialog().getByLabelText("Name"), "!");
    await userEvent.click(dialog().getByRole("button", { name: "Cancel" }));
    expect(dialog().getByText("The changes are not saved.")).toBeTruthy();
    await userEvent.click(dialog().getByRole("button", { name: "Go on editing" }));
    await userEvent.click(dialog().getByRole("button", { name: "Close" }));
    await userEvent.click(dialog().getByRole("button", { name: "Lose the changes" }));
    expect(screen.queryByRole("dialog")).toBeNull();
    await userEvent.click(screen.getByRole("button", { name: "Mill Lane" }));
    await userEvent.click(dialog().getByRole("button", { name: "Cancel" }));
    expect(screen.queryByRole("dialog")).toBeNull();
  });

  it("are removed only when asked twice, and what refers to one is said", async () => {
    const sent = serving({ refuse: ({ method }) => (method === "DELETE" ? refusal(409, "S1 cannot be removed: sales of it are loaded.") : undefined) });
    renderRouted(<StoresPage />);
    await userEvent.click(await screen.findByRole("button", { name: "Harbour Street" }));
    await userEvent.click(dialog().getByRole("button", { name: "Remove" }));
    expect(sent).toEqual([]);
    await userEvent.click(dialog().getByRole("button", { name: "Remove" }));
    expect(await dialog().findByText(/sales of it are loaded/)).toBeTruthy();
    expect(sent).toMatchObject([{ method: "DELETE", address: "/api/stores/S1", headers: { "If-Match": '"one"' } }]);
  });

  it("are to be read, and no more, by those who may not write", async () => {
    serving({ permissions: ["read"] });
    renderRouted(<StoresPage />);
    await userEvent.click(await screen.findByRole("button", { name: "Harbour Street" }));
    expect(dialog().queryByRole("button", { name: "Save" })).toBeNull();
    expect(dialog().getByLabelText("Name").matches(":disabled")).toBe(true);
    expect(dialog().getByText("Who changed what")).toBeTruthy();
    expect(screen.queryByRole("button", { name: "Enter a store" })).toBeNull();
    expect(screen.queryByRole("link", { name: "Upload a file" })).toBeNull();
    expect(screen.getByRole("link", { name: "Save as CSV" }).getAttribute("href")).toBe("/api/stores.csv");
  });

  it("that could not be read can be asked for again, and none yet teaches the next step", async () => {
    let isDown = true;
    serving({ answers: { "/api/stores": () => (isDown ? { nothing: true } : { items: [] }) } });
    renderRouted(<StoresPage />);
    expect(await screen.findByText("The stores could not be read")).toBeTruthy();
    isDown = false;
    await userEvent.click(screen.getByRole("button", { name: "Try again" }));
    expect(await screen.findByText("There is no store yet")).toBeTruthy();
  });
});
