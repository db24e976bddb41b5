import type { ReactNode } from "react";

export type TableColumn<Row> = {
  id: string;
  header: string;
  /** One plain sentence about the heading, on hover and focus. */
  meaning?: string;
  /** What the column sorts by, sums and exports. */
  value: (row: Row) => string | number | null;
  /** How a cell looks; by default the value itself. */
  cell?: (row: Row) => ReactNode;
  align?: "left" | "right";
  /** CSS width; columns without one share what is left. */
  width?: string;
  sortable?: boolean;
  /** Foot of the column, from the rows in view. */
  total?: (rows: readonly Row[]) => ReactNode;
  /** Stays in the page only from this width on. */
  from?: "sm" | "md" | "lg";
};

export type TableSort = { column: string; descending: boolean };

export const sumOf = <Row>(rows: readonly Row[], value: (row: Row) => number | null): number =>
  rows.reduce((sum, row) => sum + (value(row) ?? 0), 0);

const fromClasses = { sm: "max-sm:hidden", md: "max-md:hidden", lg: "max-lg:hidden" };

/** Takes a column out of the page below the width it is meant for. */
export const hiddenBelow = <Row>(column: TableColumn<Row>): string => (column.from ? fromClasses[column.from] : "");

export const columnClass = <Row>(column: TableColumn<Row>): string =>
  `${column.align === "right" ? "text-right" : "text-left"} ${hiddenBelow(column)}`;
