import { weekIndex, yearFraction } from "../calendar";
import type { Day } from "../calendar";
import type { ModelData } from "../engine";
import type { Mechanic, Promotion } from "./sales-row";

/** What a sales model reads of one store-week, whether it happened or is planned. */
export type ModelCell = {
  store: string;
  week: Day;
  price: number;
  /** Null leaves `regularPrice` and `depth` out of the columns of all cells. */
  regularPrice: number | null;
  promotion: Promotion;
  mechanic: Mechanic;
  /** 1 where the extract calls the week a price cut; for benchmarks only. */
  deal: 0 | 1;
  event: string;
  /** Null leaves `temperatureC` out of the columns of all cells. */
  temperatureC: number | null;
  /** Share of open time on which the product could be bought, above 0 and up to 1. */
  exposure: number;
};

/**
 * The columns a sales model may name, made in this one place for fitting and predicting (all of length `cells.length`):
 * `price`, `regularPrice`, `depth` = ln(price / regularPrice), `yearFraction` on [0, 1], `weekIndex`, `temperatureC`,
 * `promotion`, `mechanic`, `deal` (0 or 1), `event`, `store` and `logExposure` = ln(exposure), an offset on the log link.
 * A column of which any cell lacks the value is left out as a whole: a model that names it then says so.
 *
 * @throws CalendarError "not-a-day" when a week is none.
 * @example modelColumns(cells).depth // Float64Array of ln(price / regularPrice)
 */
export function modelColumns(cells: readonly ModelCell[]): ModelData {
  const data: Record<string, Float64Array | string[]> = {
    price: numbers(cells, (cell) => cell.price),
    yearFraction: numbers(cells, (cell) => yearFraction(cell.week)),
    weekIndex: numbers(cells, (cell) => weekIndex(cell.week)),
    promotion: cells.map((cell) => cell.promotion),
    mechanic: cells.map((cell) => cell.mechanic),
    deal: numbers(cells, (cell) => cell.deal),
    event: cells.map((cell) => cell.event),
    store: cells.map((cell) => cell.store),
    logExposure: numbers(cells, (cell) => Math.log(cell.exposure)),
  };
  if (cells.every((cell) => cell.regularPrice !== null)) {
    data.regularPrice = numbers(cells, (cell) => Number(cell.regularPrice));
    data.depth = numbers(cells, (cell) => Math.log(cell.price / Number(cell.regularPrice)));
  }
  if (cells.every((cell) => cell.temperatureC !== null)) data.temperatureC = numbers(cells, (cell) => Number(cell.temperatureC));
  return data;
}

/** Float64Array.from with a function takes ten times as long, and this runs while a person drags. */
function numbers(cells: readonly ModelCell[], valueOf: (cell: ModelCell) => number): Float64Array {
  const values = new Float64Array(cells.length);
  for (let index = 0; index < cells.length; index++) values[index] = valueOf(cells[index]);
  return values;
}
