/** What the values of a column of ours are. */
export type ColumnType = "week" | "day" | "number" | "share" | "flag" | "mechanic" | "promotion" | "text";

const types: Record<string, ColumnType> = {
  week: "week",
  opened: "day", closed: "day", valid_from: "day", first_day: "day", last_day: "day",
  units: "number", net_sales: "number", regular_price: "number", shelf_price: "number", unit_cost: "number", temperature_c: "number", per_unit: "number", lump_sum: "number",
  promotion_days: "number", open_days: "number", stock_out_days: "number",
  tax_rate: "share",
  feature: "flag", display: "flag", sold_by_weight: "flag",
  mechanic: "mechanic", promotion: "promotion",
};

/**
 * What the values of a column of ours are; a column has the same name and type in every kind of file.
 *
 * @example columnType("opened") // "day"
 */
export function columnType(column: string): ColumnType {
  return types[column] ?? "text";
}
