import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { accessibilityViolations, launchBrowser, openPage, signIn } from "../support/browser";
import { startRunningApp } from "../support/running-app";
import type { RunningApp } from "../support/running-app";

let app: RunningApp;
let browser: Browser;

beforeAll(async () => {
  [app, browser] = await Promise.all([startRunningApp({ demo: true }), launchBrowser()]);
});
afterAll(async () => {
  await browser?.close();
  await app?.stop();
});

const dialog = (page: Page) => page.getByRole("dialog");
const save = (page: Page) => dialog(page).getByRole("button", { name: "Save" }).click();

describe("keeping the catalogue", () => {
  it("enters a store, lists a product there at a new price, and reads who did it", async () => {
    const { page, complaints, close } = await openPage(browser, app.url);
    await signIn(page, "data");
    await page.goto("/extracts/catalogue");
    await page.getByRole("button", { name: "Enter a store" }).click();
    await save(page);
    await dialog(page).getByText("A code is needed.").waitFor();
    await dialog(page).getByLabel("Code").fill("S25");
    await dialog(page).getByLabel("Name").fill("Zennor Quay");
    await dialog(page).getByLabel("Region").fill("Coast");
    expect(await accessibilityViolations(page)).toEqual([]);
    await save(page);
    await page.getByText("Zennor Quay is saved.").waitFor();
    await page.getByRole("button", { name: "Zennor Quay" }).waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);

    await page.getByRole("navigation", { name: "Catalogue" }).getByRole("link", { name: "Products" }).click();
    await page.getByLabel("Code, name, brand or GTIN").fill("vanilla");
    await page.getByRole("link", { name: /Vanilla Ice Cream/ }).click();
    await page.getByRole("button", { name: "List in stores" }).click();
    await dialog(page).getByLabel("First day").fill("2026-07-06");
    await dialog(page).getByLabel("S25 Zennor Quay").check();
    await save(page);
    await page.getByText("It is listed in one store.").waitFor();
    await page.getByRole("button", { name: "From another day" }).click();
    await dialog(page).getByLabel("Valid from").fill("2026-07-06");
    await dialog(page).getByLabel("Regular price").fill("3.79");
    await save(page);
    await page.getByRole("button", { name: "6 July 2026" }).waitFor();
    const history = page.getByRole("region", { name: "Who changed what" });
    await history.getByText(/entered the terms from 6 July 2026/).waitFor();
    await history.getByText(/entered the listing in S25 from 6 July 2026/).waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);
    expect(complaints).toEqual([]);
    await close();
  });

  it("moves an event by keyboard, and keeps what two people changed at once", async () => {
    const { page, complaints, close } = await openPage(browser, app.url);
    await signIn(page, "data");
    await page.goto("/extracts/catalogue/events?year=2026");
    const regatta = page.getByRole("button", { name: /^Coast Regatta, Coast/ });
    await regatta.focus();
    await page.keyboard.press("Enter");
    await dialog(page).getByLabel("Name").fill("Regatta of the coast");
    const { items } = (await (await page.request.get("/api/events?code=regatta&from=2026-01-01&to=2026-12-31")).json()) as { items: Record<string, unknown>[] };
    const { id, version: _version, ...event } = items[0];
    await page.request.put(`/api/events/${String(id)}`, { data: { ...event, lastDay: "2026-07-31" } });
    await save(page);
    await dialog(page).getByText(/What you have changed still stands/).waitFor();
    expect(await dialog(page).getByLabel("Name").inputValue()).toBe("Regatta of the coast");
    await expect.poll(() => dialog(page).getByLabel("Last day").inputValue()).toBe("2026-07-31");
    await save(page);
    await page.getByRole("button", { name: /^Regatta of the coast, Coast, .* to 31 July 2026$/ }).waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);
    expect(complaints).toEqual([]);
    await close();
  });

  it("shows temperatures against what is usual, and lets others read alone", async () => {
    const { page, complaints, close } = await openPage(browser, app.url);
    await signIn(page, "planner");
    await page.goto("/extracts/catalogue/temperatures?region=Moor&year=2026");
    await page.getByRole("img", { name: "Weekly mean temperatures of Moor in 2026, and what is usual" }).waitFor();
    expect(await page.getByRole("link", { name: "Upload a file" }).count()).toBe(0);
    expect(await accessibilityViolations(page)).toEqual([]);
    await page.goto("/extracts/catalogue/stores");
    await page.getByRole("button", { name: "Ashgill" }).click();
    expect(await dialog(page).getByRole("button", { name: "Save" }).count()).toBe(0);
    const [download] = await Promise.all([page.waitForEvent("download"), page.keyboard.press("Escape").then(() => page.getByRole("link", { name: "Save as CSV" }).click())]);
    expect(download.suggestedFilename()).toBe("stores.csv");
    expect(complaints).toEqual([]);
    await close();
  });
});
