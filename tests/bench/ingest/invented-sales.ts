import { once } from "node:events";
import { createWriteStream } from "node:fs";
import { addWeeks } from "@shared/calendar";
import { seededUniform } from "../../engine/support/generator";

/*
 * A chain and its sales of 64 products in 157 weeks, four calendar years, and in as many stores as the wanted rows need.
 * One product more has sold in few stores only: its rows are loaded beforehand, so that there is a model to read.
 */

const firstWeek = "2023-01-02";
const weekCount = 157;
const productCount = 64;
const regionCount = 8;
const modelledStores = 4;

const weeks = Array.from({ length: weekCount }, (_, at) => addWeeks(firstWeek, at));
const codeOf = (letter: string, at: number) => `${letter}${String(at + 1).padStart(4, "0")}`;
const storeCodes = (count: number) => Array.from({ length: count }, (_, at) => codeOf("S", at));

/** Codes of the products of the large file, and that of the product which is there before. */
export const productCodes = Array.from({ length: productCount }, (_, at) => codeOf("P", at));
export const modelledProduct = codeOf("P", productCount);
export const modelledStore = codeOf("S", 0);

/** How many stores give so many rows; the last one may not need all of its own. */
export const storesFor = (rows: number) => Math.max(modelledStores, Math.ceil(rows / (productCount * weekCount)));

/** Text of a stores file. */
export function storesFile(stores: number): string {
  return ["store,name,region", ...storeCodes(stores).map((code, at) => `${code},Store ${at + 1},region ${(at % regionCount) + 1}`)].join("\n");
}

/** Text of a products file. */
export function productsFile(): string {
  const rows = [...productCodes, modelledProduct].map((code, at) => `${code},Product ${at + 1},category ${(at % 6) + 1},1.20,2.49,0.21`);
  return ["product,name,category,unit_cost,regular_price,tax_rate", ...rows].join("\n");
}

type Cells = { units: number; price: number; feature: number; display: number };

/** A week of one product in one store: a promotion about every eighth week, and units that answer to the price. */
function cellsOf(uniform: () => number): Cells {
  const isPromoted = uniform() < 0.125;
  const price = isPromoted ? 1.99 : uniform() < 0.1 ? 2.29 : 2.49;
  const feature = isPromoted && uniform() < 0.6 ? 1 : 0;
  const units = Math.floor(40 * uniform() * (price / 2.49) ** -2.2 * (1 + 0.5 * feature)) + 1;
  return { units, price, feature, display: isPromoted && uniform() < 0.4 ? 1 : 0 };
}

const textOf = ({ units, price, feature, display }: Cells) =>
  `${units},${(units * price).toFixed(2)},2.49,${price.toFixed(2)},${feature},${display},${price < 2 ? "price_cut" : "none"}`;

const header = "week,store,product,units,net_sales,regular_price,shelf_price,feature,display,mechanic";

/** Text of the sales that are there before, with a temperature in each row. */
export function modelledSalesFile(): string {
  const uniform = seededUniform(7);
  const rows = storeCodes(modelledStores).flatMap((store) => weeks.map((week, at) =>
    `${week},${store},${modelledProduct},${textOf(cellsOf(uniform))},${(12 - 9 * Math.cos((2 * Math.PI * at) / 52) + uniform()).toFixed(1)}`));
  return [`${header},temperature_c`, ...rows].join("\n");
}

/** What the database calls each store and product, by our code. */
export type DatabaseIds = { stores: ReadonlyMap<string, number>; products: ReadonlyMap<string, number> };

type Wanted = { rows: number; csv: string; copy: string; ids: DatabaseIds };

/**
 * Writes the large sales file, week by week as a till system exports it, and the same rows for PostgreSQL's COPY, with the
 * database's own numbers in place of our codes.
 */
export async function writeSales({ rows, csv, copy, ids }: Wanted): Promise<void> {
  const [file, forCopy] = [new FileWriter(csv), new FileWriter(copy)];
  const uniform = seededUniform(11);
  const stores = storeCodes(storesFor(rows));
  let written = 0;
  await file.add(header);
  for (const week of weeks) {
    for (const store of stores) {
      for (const product of productCodes) {
        if (written === rows) break;
        const cells = textOf(cellsOf(uniform));
        await file.add(`${week},${store},${product},${cells}`);
        await forCopy.add(`${week},${ids.stores.get(store)},${ids.products.get(product)},${cells}`);
        written++;
      }
    }
  }
  await Promise.all([file.end(), forCopy.end()]);
}

/** Writes lines to a file by the hundred kilobytes. */
class FileWriter {
  readonly #stream;
  #lines: string[] = [];

  constructor(path: string) {
    this.#stream = createWriteStream(path);
  }

  async add(line: string): Promise<void> {
    if (this.#lines.push(line) < 2_000) return;
    if (!this.#send()) await once(this.#stream, "drain");
  }

  async end(): Promise<void> {
    this.#send();
    this.#stream.end();
    await once(this.#stream, "finish");
  }

  #send(): boolean {
    if (this.#lines.length === 0) return true;
    const text = `${this.#lines.join("\n")}\n`;
    this.#lines = [];
    return this.#stream.write(text);
  }
}
