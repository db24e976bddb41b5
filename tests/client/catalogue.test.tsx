import { screen, waitFor, within } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, beforeAll, describe, expect, it, vi } from "vitest";
import { EventsPage } from "@/features/catalogue/components/events-page";
import { ProductPage } from "@/features/catalogue/components/product-page";
import { ProductsPage } from "@/features/catalogue/components/products-page";
import { StoresPage } from "@/features/catalogue/components/stores-page";
import { TemperaturesPage } from "@/features/catalogue/components/temperatures-page";
import { answerRequests, refusal } from "./support/answer";
import { sessionWith } from "./support/extract";
import { renderRouted } from "./support/routed";
import "./support/render";

afterEach(() => vi.unstubAllGlobals());

beforeAll(() => {
  // jsdom knows no modal dialogs.
  HTMLDialogElement.prototype.showModal = function () { this.open = true; };
  HTMLDialogElement.prototype.close = function () { this.open = false; };
});

const stores = [
  { code: "S1", name: "Harbour Street", region: "coast", opened: "2015-03-02", closed: null, version: "one" },
  { code: "S2", name: "Mill Lane", region: "town", opened: null, closed: "2026-05-31", version: "two" },
];
const product = {
  code: "P1", name: "Oat bar", gtin: "2000000000015", brand: "Larkfield", category: "snacks", categoryName: "Snacks", soldByWeight: false,
  replaces: null, replacesSizeRatio: null, unitCost: 0.8, regularPrice: 1.79, taxRate: 0.21, version: "p1",
};
const later = { ...product, code: "P2", name: "Oat bar, large", replaces: "P1", replacesSizeRatio: 0.75, version: "p2" };
const fair = { id: 7, code: "fair", name: "Summer fair", firstDay: "2026-06-05", lastDay: "2026-06-07", region: "coast", version: "e7" };
const week = (day: string, part: object = {}) => ({ week: day, temperatureC: null, source: null, version: null, normalC: 14, lowC: 11, highC: 17, ...part });

type Sent = { method: string; address: string; headers: Record<string, string>; body: unknown };
type Refuse = (sent: Sent) => ReturnType<typeof refusal> | undefined;

/** A server with a small catalogue; it notes what it is sent, and refuses what it is told to. */
const serving = ({ permissions = ["read", "catalogue:write"], refuse, answers = {} }: { permissions?: string[]; refuse?: Refuse; answers?: Record<string, () => unknown> } = {}) => {
  const sent: Sent[] = [];
  const known: Record<string, () => unknown> = {
    "/api/session": () => sessionWith(permissions),
    "/api/stores": () => ({ items: stores }),
    "/api/products": () => ({ items: [product, later] }),
    "/api/categories": () => ({ items: [{ code: "snacks", name: "Snacks", products: 2, version: "c" }] }),
    "/api/events": () => ({ items: [fair] }),
    "/api/products/P1/terms": () => ({ items: [{ validFrom: "1970-01-01", unitCost: 0.8, regularPrice: 1.79, taxRate: 0.21, version: "t1" }] }),
    "/api/funding": () => ({ items: [] }),
    "/api/listings": () => ({ items: [{ product: "P1", store: "S1", firstDay: "2026-01-05", lastDay: null, version: "l1" }], nextCursor: null }),
    "/api/catalogue-history": () => ({ items: [], nextCursor: null }),
    "/api/temperatures/region/coast": () => ({ items: [week("2026-06-01", { temperatureC: 15.5, source: "region", version: "w1" }), week("2026-06-08")], firstKnown: "2026-06-01", lastKnown: "2026-06-01" }),
    ...answers,
  };
  answerRequests((address, { method = "GET", body, headers }) => {
    const [path] = address.split("?");
    if (method === "GET") return path in known ? { status: 200, body: known[path]() } : { status: 404, body: {} };
    const one = { method, address, headers: headers as Record<string, string>, body: body === undefined ? undefined : JSON.parse(String(body)) };
    sent.push(one);
    const refused = refuse?.(one);
    if (refused) return refused;
    return method === "DELETE" ? { status: 204 } : { status: method === "POST" ? 201 : 200, body: { ...stores[0], ...product, ...fair, ...week("2026-06-08"), entered: 2, validFrom: "2026-07-01", version: "new", ...(one.body as object) } };
  });
  return sent;
};

const dialog = () => within(screen.getByRole("dialog"));
const iso = { kind: "iso", weekStart: 1 } as const;

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
