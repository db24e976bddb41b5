import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { dirtyExtract, newStore, ownWordForDisplay } from "../../demo/dirty-extract";
import { generateDemo } from "../../demo/generate";
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

const dirty = dirtyExtract(generateDemo());
const file = { name: dirty.name, mimeType: "text/csv", buffer: Buffer.from(dirty.bytes) };

const upload = async (page: Page, files: { name: string; mimeType: string; buffer: Buffer }[]) => {
  await page.goto("/extracts");
  await page.setInputFiles("input[type=file]", files);
};

const step = (page: Page, name: string) => page.getByRole("listitem").filter({ has: page.getByRole("heading", { name: new RegExp(`^${name}`) }) });

/** The cell of a store's week in the picture, as it is spoken. */
async function cellOf(page: Page, store: string): Promise<string> {
  const grid = page.getByRole("grid");
  await grid.focus();
  await grid.press("Home");
  for (let row = 0; row < 40; row += 1) {
    const label = (await page.getByRole("gridcell").getAttribute("aria-label")) ?? "";
    if (label.startsWith(store)) return label;
    await grid.press("ArrowDown");
  }
  throw new Error(`The picture has no store ${store}.`);
}

/** Week 23 of 2026 begins on 1 June; the picture that ends with it has it as its last. */
const pictureUpToWeek23 = "/extracts/coverage?until=2026-06-01&weeks=26";

describe("a data admin's Monday", () => {
  it("brings a foreign, dirty file in: mapping, reasons, a new store, a second look, coverage, and back out", async () => {
    const { page, complaints, close } = await openPage(browser, app.url);
    await signIn(page, "data");
    await upload(page, [file]);
    await page.getByRole("button", { name: "Upload", exact: true }).click();

    // How it is read: a column is not found, the two prices are mistaken for each other, and a word is not known.
    await page.getByRole("region", { name: "The file’s first rows as they stand" }).waitFor();
    expect(await page.getByLabel("Letters are written in").inputValue()).toBe("windows-1252");
    expect(await page.getByText("“31/05/2026” is 31 May 2026").count()).toBe(1);
    await page.getByLabel("What Sold becomes").selectOption("units");
    await page.getByLabel("What Takings becomes").selectOption("net_sales");
    await page.getByLabel("What Usual price € becomes").selectOption("regular_price");
    await page.getByLabel("What Till price € becomes").selectOption("shelf_price");
    await page.getByLabel(new RegExp(`“${ownWordForDisplay}”`)).selectOption("display");
    await page.getByText("All of the first 20 rows can be read.").waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);
    await page.getByLabel("Name of the source").fill("Coast tills");
    await page.getByRole("button", { name: "Use this and save it as “Coast tills”" }).click();

    // What is wrong: reasons with their own column names, and a store that nobody has entered.
    const issues = page.getByRole("region", { name: "Issues" });
    await issues.getByText("a few").waitFor();
    expect(await issues.innerText()).toContain("Sold (units)");
    await page.getByRole("button", { name: /There is no store with this code/ }).click();
    await page.waitForURL(/rule=unknown-store/);
    expect(await accessibilityViolations(page)).toEqual([]);
    await page.getByLabel(`Name of ${newStore.code}`).fill(newStore.name);
    await page.getByLabel(`Region of ${newStore.code}`).fill(newStore.region);
    await page.getByRole("button", { name: "Enter it and check again" }).click();
    await page.getByText(/names 1 product that the catalogue does not have/).waitFor();

    // What loading changes: corrections of a loaded week want a second look.
    const load = page.getByRole("button", { name: /^Load \d+ rows$/ });
    await load.waitFor();
    expect(await load.isDisabled()).toBe(true);
    await page.getByLabel("I have looked at this, and it is right").check();
    expect(await accessibilityViolations(page)).toEqual([]);
    await load.click();
    await step(page, "Loaded").getByRole("button", { name: "Withdraw" }).waitFor();
    const address = page.url();

    await page.goto(pictureUpToWeek23);
    expect(await cellOf(page, newStore.name)).toBeTruthy();
    await page.getByRole("grid").press("End");
    await page.getByRole("gridcell", { name: new RegExp(`^${newStore.name}, week 23, 2026.*: there, 18 rows, from coast-tills.csv$`) }).waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);
    await page.getByRole("grid").press("Enter");
    await page.waitForURL(new RegExp(`${new URL(address).pathname}$`));

    await page.getByRole("button", { name: "Withdraw", exact: true }).click();
    await page.getByRole("dialog").getByText(/taken out/).waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);
    await page.getByRole("dialog").getByRole("button", { name: "Withdraw", exact: true }).click();
    await page.getByText("Withdrawn", { exact: true }).waitFor();

    await page.goto(pictureUpToWeek23);
    await cellOf(page, newStore.name);
    await page.getByRole("grid").press("End");
    await page.getByRole("gridcell", { name: new RegExp(`^${newStore.name}, week 23, 2026.*: withdrawn`) }).waitFor();
    await page.keyboard.press("t");
    await page.getByRole("region", { name: /^Numbers of/ }).getByText("withdrawn").first().waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);
    expect(complaints).toEqual([]);
    await close();
    // A whole Monday: eight pages, each looked at for what keeps people out.
  }, 180_000);

  it("finds next week's file of that source recognised by itself, and the layout among the saved ones", async () => {
    const { page, complaints, close } = await openPage(browser, app.url, { colorScheme: "dark" });
    await signIn(page, "data");
    await page.goto("/extracts/layouts");
    await page.getByRole("cell", { name: "Coast tills", exact: true }).waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);
    await upload(page, [file]);
    await page.getByRole("button", { name: "Upload", exact: true }).click();
    await page.getByText("Recognised: read like “Coast tills”").waitFor();
    expect(complaints).toEqual([]);
    await close();
  });

  it("sends several files at once, and is told beside a file why it cannot be sent", async () => {
    const { page, complaints, close } = await openPage(browser, app.url);
    await signIn(page, "data");
    await page.setViewportSize({ width: 375, height: 812 });
    const csv = (name: string, text: string) => ({ name, mimeType: "text/csv", buffer: Buffer.from(text) });
    await upload(page, [
      csv("one.csv", "store,name,region\nS31,Gorse Head,Moor\n"),
      csv("two.csv", "event,name,first_day,last_day\nfair,Autumn fair,2026-10-05,2026-10-11\n"),
      csv("three.csv", ""),
      { name: "four.csv", mimeType: "text/csv", buffer: Buffer.from([0x50, 0x4b, 0x03, 0x04, 0, 0, 0, 0]) },
    ]);
    expect(await page.getByLabel("What one.csv holds").inputValue()).toBe("stores");
    expect(await page.getByLabel("What two.csv holds").inputValue()).toBe("events");
    await page.getByText("The file is empty. Export it again.").waitFor();
    await page.getByText(/It is a spreadsheet.s workbook or an archive/).waitFor();
    await page.getByRole("button", { name: "Upload 2 files" }).click();
    await page.getByRole("link", { name: "See its check" }).nth(1).waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);
    await page.getByRole("link", { name: "See its check" }).first().click();
    await page.getByRole("button", { name: "Load 1 row" }).waitFor();
    expect(await accessibilityViolations(page)).toEqual([]);
    expect(complaints).toEqual([]);
    await close();
  });
});
