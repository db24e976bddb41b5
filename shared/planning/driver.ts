import type { FittedTerm } from "../engine";

/**
 * What can move units, in the words of the screens. A term of several drivers is an interaction and named after all of
 * them, for example "price:promotion".
 */
export type Driver = string;

const DRIVER_OF_COLUMN: Readonly<Record<string, Driver>> = {
  price: "price",
  depth: "price",
  regularPrice: "price",
  deal: "deal",
  temperatureC: "temperature",
  yearFraction: "season",
  weekIndex: "trend",
  promotion: "promotion",
  mechanic: "mechanic",
  event: "event",
  store: "store",
};

/**
 * The driver that a column of a sales model belongs to; a column of another name is a driver of its own.
 *
 * @example driverOfColumn("depth") // "price"
 */
export function driverOfColumn(column: string): Driver {
  return DRIVER_OF_COLUMN[column] ?? column;
}

/**
 * The driver that a fitted term belongs to: that of its columns, or an interaction named after all of them.
 *
 * @example driverOfTerm({ columns: ["price", "promotion"] }) // "price:promotion"
 */
export function driverOfTerm({ columns }: Pick<FittedTerm, "columns">): Driver {
  return [...new Set(columns.map(driverOfColumn))].join(":");
}
