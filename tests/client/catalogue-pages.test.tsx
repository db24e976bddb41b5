import { screen, waitFor, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, describe, expect, it, vi } from "vitest";
import { EventsPage } from "@/features/catalogue/components/events-page";
import { ProductPage } from "@/features/catalogue/components/product-page";
import { ProductsPage } from "@/features/catalogue/components/products-page";
import { TemperaturesPage } from "@/features/catalogue/components/temperatures-page";
import { serving } from "./support/catalogue-server";
import { renderRouted } from "./support/routed";

afterEach(() => vi.unstubAllGlobals());

const iso = { kind: "iso", weekStart: 1 } as const;
const dialog = () => within(screen.getByRole("dialog"));

describe("a product's page", () => {
  const open = () => renderRouted(<ProductPage code="P1" today="2026-06-15" onRemoved={() => undefined} />);

  it("says what it is, and what replaced it", async () => {
    serving();
    open();
    expect(await screen.findByRole("heading", { name: "Oat bar", level: 1 })).toBeTruthy();
    expect(screen.getByText(/replaced by/).textContent).toContain("P2");
    expect(await screen.findByText("No supplier gives anything")).toBeTruthy();
    expect(await screen.findByRole("button", { name: "S1 Harbour Street" })).toBeTruthy();
  });

  it("takes terms from another day, as new ones", async () => {
    const sent = serving();
    open();
    await userEvent.click(await screen.findByRole("button", { name: "From another day" }));
    await userEvent.type(dialog().getByLabelText("Valid from"), "2026-07-01");
    await userEvent.clear(dialog().getByLabelText("Regular price"));
    await userEvent.type(dialog().getByLabelText("Regular price"), "1,99");
    await userEvent.clear(dialog().getByLabelText("Tax"));
    await userEvent.type(dialog().getByLabelText("Tax"), "5.5");
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await screen.findByText("The terms are saved.")).toBeTruthy();
    expect(sent).toMatchObject([{
      method: "PUT", address: "/api/products/P1/terms/2026-07-01", headers: { "If-None-Match": "*" }, body: { unitCost: 0.8, regularPrice: 1.99, taxRate: 0.055 },
    }]);
  });

  it("lists it in stores by region at once", async () => {
    const sent = serving();
    open();
    await userEvent.click(await screen.findByRole("button", { name: "List in stores" }));
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await dialog().findByText("Choose at least one store.")).toBeTruthy();
    await userEvent.type(dialog().getByLabelText("First day"), "2026-07-06");
    await userEvent.click(dialog().getByRole("button", { name: "All" }));
    await userEvent.click(dialog().getByRole("checkbox", { name: "coast" }));
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await screen.findByText("It is listed in 2 stores.")).toBeTruthy();
    expect(sent).toMatchObject([{ method: "POST", address: "/api/listings", body: { product: "P1", stores: ["S2"], firstDay: "2026-07-06", lastDay: null } }]);
  });

  it("of a code that is none leads to those that are", async () => {
    serving();
    renderRouted(<ProductPage code="X9" today="2026-06-15" onRemoved={() => undefined} />);
    expect(await screen.findByText("There is no product X9")).toBeTruthy();
  });
});

describe("the products of the catalogue", () => {
  it("are entered with their terms, the GTIN's check digit checked at once", async () => {
    const sent = serving();
    renderRouted(<ProductsPage />);
    await userEvent.click(await screen.findByRole("button", { name: "Enter a product" }));
    await userEvent.type(dialog().getByLabelText("Code"), "P3");
    await userEvent.type(dialog().getByLabelText("Name"), "Rye bar");
    await userEvent.type(dialog().getByLabelText("Category"), "snacks");
    await userEvent.type(dialog().getByLabelText("GTIN"), "2000000000023");
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await dialog().findByText(/This is no GTIN/)).toBeTruthy();
    await userEvent.clear(dialog().getByLabelText("GTIN"));
    await userEvent.type(dialog().getByLabelText("Regular price"), "1.59");
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await screen.findByText("Rye bar is saved.")).toBeTruthy();
    expect(sent).toMatchObject([{ address: "/api/products", body: { code: "P3", gtin: null, replaces: null, terms: { unitCost: null, regularPrice: 1.59, taxRate: 0 } } }]);
  });
});

describe("the calendar of events", () => {
  it("has each event over its days as a button that says all, and opens it", async () => {
    const sent = serving();
    renderRouted(<EventsPage calendar={iso} today="2026-06-15" />);
    const bar = await screen.findByRole("button", { name: "Summer fair, coast, 5 June 2026 to 7 June 2026" });
    expect(screen.getByText(/53 weeks, 1 event/)).toBeTruthy();
    await userEvent.click(bar);
    await userEvent.selectOptions(dialog().getByLabelText("Held in"), "");
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await screen.findByText("Summer fair is saved.")).toBeTruthy();
    expect(sent).toMatchObject([{ method: "PUT", address: "/api/events/7", headers: { "If-Match": '"e7"' }, body: { region: null } }]);
  });

  it("shows the year that the address names, and a list instead", async () => {
    serving();
    const { router } = renderRouted(<EventsPage calendar={iso} today="2026-06-15" />, { at: "/events?year=2025" });
    expect(await screen.findByText(/52 weeks, no event/)).toBeTruthy();
    await userEvent.click(screen.getByRole("button", { name: "Show 2026" }));
    expect(await screen.findByText(/53 weeks, 1 event/)).toBeTruthy();
    await userEvent.click(screen.getByRole("radio", { name: "List" }));
    expect(await screen.findByRole("table", { name: "Events" })).toBeTruthy();
    expect(router.state.location.search).toBe("?year=2026&view=list");
  });
});

describe("temperatures", () => {
  it("are entered for a week that has none, and say what is usual", async () => {
    const sent = serving();
    renderRouted(<TemperaturesPage calendar={iso} unit="celsius" today="2026-06-15" />);
    await userEvent.click(await screen.findByRole("button", { name: "Enter" }));
    await userEvent.type(dialog().getByLabelText(/Mean of the week/), "16,5");
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    expect(await screen.findByText("The temperature is saved.")).toBeTruthy();
    expect(sent).toMatchObject([{ address: "/api/temperatures/region/coast/2026-06-08", headers: { "If-None-Match": "*" }, body: { temperatureC: 16.5 } }]);
  });

  it("are typed in the chain's unit, and kept in degrees Celsius", async () => {
    const sent = serving();
    renderRouted(<TemperaturesPage calendar={iso} unit="fahrenheit" today="2026-06-15" />);
    await userEvent.click(await screen.findByRole("button", { name: "59.9°" }));
    const field = dialog().getByLabelText("Mean of the week, °F");
    await userEvent.clear(field);
    await userEvent.type(field, "68");
    await userEvent.click(dialog().getByRole("button", { name: "Save" }));
    await waitFor(() => expect(sent).toMatchObject([{ headers: { "If-Match": '"w1"' }, body: { temperatureC: 20 } }]));
  });
});
