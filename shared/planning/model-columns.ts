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
    price: Float64Array.from(cells, (cell) => cell.price),
    yearFraction: Float64Array.from(cells, (cell) => yearFraction(cell.week)),
    weekIndex: Float64Array.from(cells, (cell) => weekIndex(cell.week)),
    promotion: cells.map((cell) => cell.promotion),
    mechanic: cells.map((cell) => cell.mechanic),
    deal: Float64Array.from(cells, (cell) => cell.deal),
    event: cells.map((cell) => cell.event),
    store: cells.map((cell) => cell.store),
    logExposure: Float64Array.from(cells, (cell) => Math.log(cell.exposure)),
  };
  const regularPrices = cells.map((cell) => cell.regularPrice).filter((price) => price !== null);
  if (regularPrices.length === cells.length) {
    data.regularPrice = Float64Array.from(regularPrices);
    data.depth = Float64Array.from(cells, (cell, index) => Math.log(cell.price / regularPrices[index]));
  }
  const temperatures = cells.map((cell) => cell.temperatureC).filter((temperature) => temperature !== null);
  if (temperatures.length === cells.length) data.temperatureC = Float64Array.from(temperatures);
  return data;
}
