import {
  createColumnHelper,
  createSortedRowModel,
  rowSortingFeature,
  tableFeatures,
  useTable,
} from "@tanstack/react-table";
import { useMemo } from "react";
import type { TableColumn, TableSort } from "./data-table-columns";

const features = tableFeatures({ rowSortingFeature, sortedRowModel: createSortedRowModel() });

const compareTexts = new Intl.Collator("en", { numeric: true, sensitivity: "base" }).compare;

const compareValues = (a: string | number, b: string | number): number =>
  typeof a === "number" && typeof b === "number" ? a - b : compareTexts(String(a), String(b));

type DataTableOptions<Row> = {
  rows: readonly Row[];
  columns: readonly TableColumn<Row>[];
  rowKey: (row: Row) => string;
  initialSort?: TableSort;
};

/** Rows in the order chosen; missing values last whichever way. */
export const useDataTable = <Row extends object>({ rows, columns, rowKey, initialSort }: DataTableOptions<Row>) => {
  const definitions = useMemo(() => {
    const helper = createColumnHelper<typeof features, Row>();
    return helper.columns(
      columns.map((column) =>
        helper.accessor((row) => column.value(row) ?? undefined, {
          id: column.id,
          enableSorting: column.sortable ?? true,
          sortUndefined: "last",
          sortFn: (a, b, id) => compareValues(a.getValue<string | number>(id), b.getValue<string | number>(id)),
        }),
      ),
    );
  }, [columns]);
  const data = useMemo(() => [...rows], [rows]);
  return useTable({
    features,
    columns: definitions,
    data,
    getRowId: rowKey,
    initialState: { sorting: initialSort ? [{ id: initialSort.column, desc: initialSort.descending }] : [] },
  });
};
