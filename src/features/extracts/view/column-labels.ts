import { capitalised } from "@/lib/format/capitalised";

const labels: Record<string, string> = {
  net_sales: "Net sales",
  stock_out_days: "Sold-out days",
  unit_cost: "Unit cost",
  temperature_c: "Temperature (°C)",
  gtin: "GTIN",
  valid_from: "Valid from",
  tax_rate: "Tax rate",
  multi_buy: "Multi-buy",
  promotion: "Promotion in one word",
};

/** A column of ours as people call it: "net_sales" is "Net sales". */
export const columnLabel = (column: string): string => labels[column] ?? capitalised(column.replaceAll("_", " "));
