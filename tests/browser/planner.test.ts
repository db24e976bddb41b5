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

const liftShown = async (page: Page) => Number(await page.getByTestId("lift").getAttribute("data-lift"));

/** Drags the handle of a lane to a value, as a hand does: press, several moves, let go. */
async function drag(page: Page, name: string, value: number): Promise<void> {
  const slider = page.getByRole("slider", { name, exact: true });
  const [min, max, now] = await Promise.all(["aria-valuemin", "aria-valuemax", "aria-valuenow"].map(async (part) => Number(await slider.getAttribute(part))));
  const handle = await slider.boundingBox();
  const track = await slider.locator("xpath=preceding-sibling::*[@data-part='track']").boundingBox();
  if (!handle || !track) throw new Error(`The lane ${name} is not on the page.`);
  // The track's box reaches 16 px beyond the axis at both ends.
  const pixelsPerUnit = (track.width - 32) / (max - min);
  const [fromX, y] = [handle.x + handle.width / 2, handle.y + handle.height / 2];
  await page.mouse.move(fromX, y);
  await page.mouse.down();
  await page.mouse.move(fromX + (value - now) * pixelsPerUnit, y, { steps: 12 });
  await page.mouse.up();
}

describe("a planner's way", () => {
  it("drags the price to a fifth less and reads the lift that the server predicts", async () => {
    const { page, complaints, close } = await openPage(browser, app.url);
    await signIn(page, "planner");
    await page.getByRole("link", { name: "Scenarios" }).click();
    await page.getByRole("link", { name: "New scenario" }).first().click();
    await page.getByLabel("Name", { exact: true }).fill("A fifth less");
    await page.getByLabel("Product").click();
    await page.getByRole("option").first().click();
    await page.getByRole("button", { name: "All", exact: true }).click();
    await page.getByRole("button", { name: "Make the scenario" }).click();

    const price = page.getByRole("slider", { name: "Price", exact: true });
    await price.waitFor();
    expect(await liftShown(page)).toBe(0);
    const regular = Number(await price.getAttribute("aria-valuenow"));
    await drag(page, "Price", regular * 0.8);
    const planned = Number(await price.getAttribute("aria-valuenow"));
    expect(Math.abs(planned / (regular * 0.8) - 1)).toBeLessThan(0.02);
    await page.getByText(/^saved /).waitFor();

    const id = new URL(page.url()).pathname.split("/").at(-1);
    const answer = await page.request.post(`/api/scenarios/${id}/predict`, { data: { level: 0.8 } });
    expect(answer.status()).toBe(200);
    const predicted = (await answer.json()) as { lift: { estimate: number }; units: { estimate: number } };
    const shown = await liftShown(page);
    expect(shown).toBeGreaterThan(0);
    expect(Math.abs(shown - predicted.lift.estimate)).toBeLessThan(1e-9);

    await page.reload();
    await price.waitFor();
    expect(Number(await price.getAttribute("aria-valuenow"))).toBeCloseTo(planned, 4);
    expect(Math.abs((await liftShown(page)) - predicted.lift.estimate)).toBeLessThan(1e-9);
    expect(await accessibilityViolations(page)).toEqual([]);
    expect(complaints).toEqual([]);
    await close();
  });

  it("works the sliders by keyboard and takes a change back", async () => {
    const { page, complaints, close } = await openPage(browser, app.url);
    await signIn(page, "planner");
    await page.goto("/scenarios");
    await page.getByRole("link", { name: "Midsummer lemonade" }).click();
    const price = page.getByRole("slider", { name: "Price", exact: true });
    await price.waitFor();
    const before = Number(await price.getAttribute("aria-valuenow"));
    await price.press("ArrowRight");
    const stepped = Number(await price.getAttribute("aria-valuenow"));
    await price.press("PageDown");
    const paged = Number(await price.getAttribute("aria-valuenow"));
    expect(stepped - before).toBeCloseTo(0.01, 6);
    expect(paged - stepped).toBeCloseTo(-0.1, 6);
    await page.getByRole("button", { name: /^Undo/ }).click();
    await page.getByRole("button", { name: /^Undo/ }).click();
    expect(Number(await price.getAttribute("aria-valuenow"))).toBeCloseTo(before, 6);
    expect(complaints).toEqual([]);
    await close();
  });

  it("is told, and asked, when a colleague saved the same scenario meanwhile", async () => {
    const mine = await openPage(browser, app.url);
    const theirs = await openPage(browser, app.url);
    await signIn(mine.page, "planner");
    await signIn(theirs.page, "manager");
    await mine.page.goto("/scenarios");
    await mine.page.getByRole("link", { name: "Midsummer lemonade" }).click();
    const price = mine.page.getByRole("slider", { name: "Price", exact: true });
    await price.waitFor();
    const id = new URL(mine.page.url()).pathname.split("/").at(-1);
    const read = await theirs.page.request.get(`/api/scenarios/${id}`);
    const scenario = (await read.json()) as Record<string, unknown> & { version: number };
    const { name, product, stores, weeks, cells, fixedCost } = scenario;
    const saved = await theirs.page.request.put(`/api/scenarios/${id}`, {
      headers: { "If-Match": `"${scenario.version}"` },
      data: { name: `${String(name)} II`, product, stores, weeks, cells, fixedCost },
    });
    expect(saved.status()).toBe(200);
    await price.press("ArrowLeft");
    await mine.page.getByRole("heading", { name: "Someone else saved this scenario meanwhile" }).waitFor();
    await mine.page.getByRole("button", { name: "Take theirs, drop my changes" }).click();
    await mine.page.getByText(/^saved /).waitFor();
    expect(await mine.page.getByLabel("Name of the scenario").inputValue()).toBe(`${String(name)} II`);
    await Promise.all([mine.close(), theirs.close()]);
  });
});
