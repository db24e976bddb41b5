import type { Browser } from "playwright-core";
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

/** A week the demo does not have yet: one row that can be used, one of an unknown store, one without a number. */
const nextWeek = (product: string) =>
  Buffer.from(
    [
      "week,store,product,units,net_sales,regular_price",
      `2026-06-01,S01,${product},120,214.80,1.79`,
      `2026-06-01,S99,${product},80,143.20,1.79`,
      `2026-06-01,S02,${product},many,143.20,1.79`,
    ].join("\n"),
  );

describe("a data admin's way", () => {
  it("uploads a week, reads which lines cannot be used and why, loads the rest and takes it back", async () => {
    const { page, complaints, close } = await openPage(browser, app.url);
    await signIn(page, "data");
    await page.getByRole("heading", { name: "Extracts" }).waitFor();
    const products = (await (await page.request.get("/api/products")).json()) as { items: { code: string }[] };
    await page.setInputFiles("input[type=file]", {
      name: "week-23.csv",
      mimeType: "text/csv",
      buffer: nextWeek(products.items[0].code),
    });
    await page.getByRole("button", { name: "Upload", exact: true }).click();

    await page.getByRole("button", { name: "Load 1 row" }).waitFor();
    const lines = page.getByRole("table", { name: "Issues" });
    await lines.waitFor();
    expect(await lines.innerText()).toContain("many");
    expect(await accessibilityViolations(page)).toEqual([]);

    // One row of a whole week is unusual, so it wants a second look.
    await page.getByLabel("I have looked at this, and it is right").check();
    await page.getByRole("button", { name: "Load 1 row" }).click();
    await page.getByRole("button", { name: "Withdraw", exact: true }).waitFor();
    await page.getByRole("button", { name: "Withdraw", exact: true }).click();
    await page.getByRole("dialog").getByRole("button", { name: "Withdraw", exact: true }).click();
    await page.getByText("Withdrawn", { exact: true }).first().waitFor();
    expect(complaints).toEqual([]);
    await close();
  });
});

describe("a category manager's way", () => {
  it("sees one driver's curve of a product for all its stores, and sends the view as an address", async () => {
    const { page, complaints, close } = await openPage(browser, app.url, { colorScheme: "dark" });
    await signIn(page, "manager");
    await page.getByRole("link", { name: "Stores" }).click();
    await page.getByRole("heading", { name: /across 24 stores/ }).waitFor();
    await page.getByRole("radio", { name: "Temperature" }).click();
    await page.waitForURL(/driver=temperature/);
    const address = page.url();
    await page.getByRole("radio", { name: "Price" }).click();
    await page.goto(address);
    await page.getByRole("heading", { name: /across 24 stores/ }).waitFor();
    expect(await page.getByRole("radio", { name: "Temperature" }).getAttribute("aria-checked")).toBe("true");
    expect(await accessibilityViolations(page)).toEqual([]);
    expect(complaints).toEqual([]);
    await close();
  });
});
