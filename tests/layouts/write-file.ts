import { addDays } from "@shared/calendar";
import type { DateOrder, Encoding, Layout, NumberFormat, Separator } from "@shared/contract/layouts";
import fc from "fast-check";
import { bytesIn } from "./bytes-in";

/** A row of sales in our own writing. */
export type OurRow = Record<"week" | "store" | "product" | "units" | "net_sales" | "feature" | "display" | "mechanic", string>;

/** How a file is written; the layout that says the same is made from it. */
export type Writing = NumberFormat & {
  encoding: Encoding; mark: boolean; separator: Separator; lineEnd: string; dateOrder: DateOrder; dateSign: string; weekDay: Layout["weekDay"];
};

/** Columns of the file, in an order of its own. */
export const fileColumns = ["week", "store", "product", "units", "net_sales", "promotion"] as const;

/** The word for each promotion that a row can have. */
const promotionWords: Record<string, string> = {
  "00none": "none", "10none": "Leaflet", "01none": "End cap", "11none": "Both", "00multi_buy": "3 for 2", "10multi_buy": "Leaflet + 3 for 2",
  "01multi_buy": "End cap + 3 for 2", "11multi_buy": "Both / 3 for 2",
};

/** A file's bytes: the rows as a system that writes like this would write them. */
export function writeFile({ rows, writing, names }: { rows: readonly OurRow[]; writing: Writing; names: readonly (readonly [column: string, name: string])[] }): Uint8Array {
  const quoted = (field: string) => (/["\n\r,;|\t]/.test(field) ? `"${field.replaceAll('"', '""')}"` : field);
  const line = (fields: readonly string[]) => fields.map(quoted).join(writing.separator);
  const header = names.some(([, name]) => name !== "") ? [line(names.map(([, name]) => name))] : [];
  const text = [...header, ...rows.map((row) => line(names.map(([column]) => written(row, column, writing))))].join(writing.lineEnd);
  return bytesIn(writing.encoding, text, { mark: writing.mark && writing.encoding !== "windows-1252" });
}

function written(row: OurRow, column: string, writing: Writing): string {
  switch (column) {
    case "week":
      return writtenDay(writing.weekDay === "last" ? addDays(row.week, 6) : row.week, writing);
    case "units":
    case "net_sales":
      return writtenNumber(row[column], writing);
    case "promotion":
      return promotionWords[`${row.feature}${row.display}${row.mechanic}`] ?? "";
    default:
      return row[column as "store" | "product"];
  }
}

function writtenDay(day: string, { dateOrder, dateSign }: Writing): string {
  const [year = "", month = "", date = ""] = day.split("-");
  if (dateOrder === "iso") return day;
  return (dateOrder === "dmy" ? [date, month, year] : [month, date, year]).join(dateSign);
}

function writtenNumber(number: string, { decimal, thousands }: NumberFormat): string {
  const [whole = "", decimals] = number.split(".");
  return whole.replace(/\d(?=(?:\d{3})+$)/g, `$&${thousands}`) + (decimals === undefined ? "" : decimal + decimals);
}

const lower = "aeioé";
const wide = [..."مש🍎€"];
/** Texts with everything in them that needs quotes; whole characters of Windows-1252 unless `anyScript`. */
export const texts = (anyScript: boolean) =>
  fc
    .string({ unit: fc.constantFrom(...lower, ...'AZ09 ;,|\t"\n', ...(anyScript ? wide : [])), minLength: 1, maxLength: 12 })
    .map((text) => `x${text.trim()}`);

export const writings: fc.Arbitrary<Writing> = fc
  .record({
    encoding: fc.constantFrom<Encoding[]>("utf-8", "utf-16le", "utf-16be", "windows-1252"),
    mark: fc.boolean(),
    separator: fc.constantFrom<Separator[]>(",", ";", "\t", "|"),
    lineEnd: fc.constantFrom("\n", "\r\n"),
    dateOrder: fc.constantFrom<DateOrder[]>("iso", "dmy", "mdy"),
    dateSign: fc.constantFrom(".", "/", "-"),
    weekDay: fc.constantFrom<Layout["weekDay"][]>("first", "last"),
    decimal: fc.constantFrom<Layout["decimal"][]>(".", ","),
    thousands: fc.constantFrom<Layout["thousands"][]>("", ",", ".", " ", "'"),
  })
  .filter(({ decimal, thousands }) => decimal !== thousands);

const decimals = (digits: number) => fc.tuple(fc.integer({ min: 0, max: 2_500_000 }), fc.integer({ min: 0, max: 10 ** digits - 1 }))
  .map(([whole, part]) => `${whole}.${String(part).padStart(digits, "0")}`);

/** Rows of weeks that follow each other from a Monday on. */
export const rowsOf = ({ anyScript, least }: { anyScript: boolean; least: number }): fc.Arbitrary<OurRow[]> =>
  fc
    .tuple(
      fc.integer({ min: 0, max: 2_000 }),
      fc.array(
        fc.record({
          store: texts(anyScript), product: fc.integer({ min: 0, max: 99_999 }).map((code) => `P${String(code).padStart(5, "0")}`),
          units: fc.oneof(decimals(3), fc.integer({ min: -50, max: 5_000 }).map(String)), net_sales: decimals(2),
          feature: fc.constantFrom("0", "1"), display: fc.constantFrom("0", "1"), mechanic: fc.constantFrom("none", "multi_buy"),
        }),
        { minLength: least, maxLength: least + 5 },
      ),
    )
    .map(([first, rows]) => rows.map((row, at) => ({ week: addDays("1990-01-01", 7 * (first + at)), ...row })));
