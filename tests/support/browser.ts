import AxeBuilder from "@axe-core/playwright";
import { chromium, type Browser, type Page } from "playwright-core";

const flags = [
  "--no-sandbox", "--disable-background-networking", "--disable-quic", "--no-first-run", "--disable-component-update", "--disable-sync",
];

/** Debian's Chromium; `npm test` passes its path. */
export function launchBrowser(): Promise<Browser> {
  return chromium.launch({ executablePath: process.env.CHROMIUM_PATH ?? "/usr/bin/chromium", args: flags });
}

export type Look = { width?: number; height?: number; colorScheme?: "light" | "dark" };

/** A page of its own context, so that no test sees another's cookies; it fails on script errors and refused content. */
export async function openPage(browser: Browser, url: string, { width = 1440, height = 960, colorScheme = "light" }: Look = {}) {
  const context = await browser.newContext({ baseURL: url, viewport: { width, height }, colorScheme, bypassCSP: false });
  const page = await context.newPage();
  const complaints: string[] = [];
  page.on("pageerror", (error) => complaints.push(`script error: ${error.message}`));
  page.on("console", (message) => {
    if (message.type() === "error" && !/status of 4\d\d/.test(message.text())) complaints.push(message.text());
  });
  return { page, complaints, close: () => context.close() };
}

export async function signIn(page: Page, who: "data" | "planner" | "manager" | "admin"): Promise<void> {
  await page.goto("/sign-in");
  await page.getByLabel("E-mail").fill(`${who}@larkmoor.example`);
  await page.getByLabel("Password").fill("shelftide-demo");
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.getByRole("navigation").first().waitFor();
}

/** Every violation of WCAG 2.2 A and AA that axe finds, one line each. */
export async function accessibilityViolations(page: Page): Promise<string[]> {
  const result = await new AxeBuilder({ page }).withTags(["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"]).analyze();
  return result.violations.map((violation) => `${violation.id}: ${violation.help} (${violation.nodes[0]?.target.join(" ")})`);
}
