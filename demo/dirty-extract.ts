import { addDays, addWeeks } from "@shared/calendar";
import { createRandom } from "./random";
import type { Demo, SalesRow } from "./types";

/** A file as a system of another make writes it: its name and its bytes. */
export type ForeignFile = { name: string; bytes: Uint8Array };

/** The store whose tills send rows although nobody has entered it yet. */
export const newStore = { code: "S25", name: "Zawn Quay", region: "Coast" };

const headings = ["Week ending", "Branch", "Item", "Sold", "Takings", "Usual price \u20ac", "Till price \u20ac", "Offer"];

/** The word of these tills for a second placement, which no list of words has. */
export const ownWordForDisplay = "gondola";

/** Units of the last loaded week that the store corrects, and how many of its products. */
const correction = { store: "S03", share: 1.4, products: 4 };

/**
 * One dirty extract: the coast's stores send their next week in a form of their own. Semicolons, decimal commas, days as
 * 07/06/2026 that give the week's last, names of their own and a euro sign in Windows-1252; with a store that is not in the
 * catalogue, a few corrections of the week before, and lines that are plainly wrong. The same demo gives the same bytes.
 *
 * @example dirtyExtract(generateDemo()).name // "coast-tills.csv"
 */
export function dirtyExtract({ sales, stores }: Pick<Demo, "sales" | "stores">): ForeignFile {
  const lastWeek = sales[sales.length - 1].week;
  const coast = new Set(stores.filter(({ region }) => region === "Coast").map(({ store }) => store));
  const lastRows = sales.filter((row) => row.week === lastWeek && coast.has(row.store));
  const random = createRandom(1, "coast tills");
  const nextRows = lastRows.map((row) => movedOn(row, random.uniform()));
  const newRows = nextRows.filter(({ store }) => store === correction.store).map((row) => ({ ...row, store: newStore.code }));
  const corrected = lastRows
    .filter(({ store, mechanic, feature, display }) => store === correction.store && mechanic === "none" && !feature && !display)
    .slice(0, correction.products)
    .map((row) => withUnits(row, Math.round(row.units * correction.share)));
  const lines = [...corrected, ...nextRows, ...newRows].map(fieldsOf);
  const text = [headings, ...lines, ...wrongLines(nextRows)].map((fields) => fields.join(";")).join("\r\n");
  return { name: "coast-tills.csv", bytes: inWindows1252(`${text}\r\n`) };
}

/** The same row a week later: between nine and eleven tenths of its units, at its regular price. */
function movedOn(row: SalesRow, chance: number): SalesRow {
  const offer = chance > 0.92 ? { feature: true, display: false } : { feature: false, display: chance > 0.86 };
  const next = { ...row, ...offer, week: addWeeks(row.week, 1), shelfPrice: row.regularPrice, mechanic: "none" as const };
  return withUnits(next, Math.max(1, Math.round(row.units * (0.9 + chance / 5))));
}

const withUnits = (row: SalesRow, units: number): SalesRow =>
  ({ ...row, units, netSales: Math.round(units * row.shelfPrice * 100) / 100 });

/** What no system should send: a count in words, a mistyped code, takings below nothing, and a line twice over. */
function wrongLines(rows: readonly SalesRow[]): string[][] {
  const [first, second, third, fourth] = rows.map(fieldsOf);
  const put = (fields: readonly string[], at: number, value: string) => fields.map((field, index) => (index === at ? value : field));
  return [
    put(first, 2, "P1O1"),
    put(put(second, 1, "S01"), 3, "a few"),
    put(put(third, 1, "S02"), 4, "-12,40"),
    fourth,
  ];
}

function fieldsOf(row: SalesRow): string[] {
  const offer = row.feature ? "leaflet" : row.display ? ownWordForDisplay : "";
  const amounts = [row.netSales, row.regularPrice, row.shelfPrice].map((amount) => continental(amount.toFixed(2)));
  return [dayFirst(addDays(row.week, 6)), row.store, row.product, continental(String(row.units)), ...amounts, offer];
}

const continental = (number: string) => number.replace(".", ",");
const dayFirst = (day: string) => `${day.slice(8)}/${day.slice(5, 7)}/${day.slice(0, 4)}`;

/** Of the signs used here only the euro's differs from Latin 1. */
const inWindows1252 = (text: string) => new Uint8Array(Buffer.from(text.replaceAll("\u20ac", "\u0080"), "latin1"));
