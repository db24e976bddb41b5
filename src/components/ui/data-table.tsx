import { useVirtualizer } from "@tanstack/react-virtual";
import { useRef } from "react";
import type { ReactNode } from "react";
import { classNames } from "@/lib/class-names";
import { columnClass, hiddenBelow } from "./data-table-columns";
import type { TableColumn, TableSort } from "./data-table-columns";
import { ColumnHeading } from "./data-table-heading";
import { useDataTable } from "./use-data-table";

type DataTableProps<Row> = {
  /** Names the table for those who cannot see where it stands. */
  caption: string;
  rows: readonly Row[];
  columns: readonly TableColumn<Row>[];
  rowKey: (row: Row) => string;
  initialSort?: TableSort;
  /** Row drawn as chosen. */
  selectedKey?: string | null;
  onRowClick?: (row: Row) => void;
  rowHeight?: number;
  /** Stands first whatever the order, as a whole does above its parts; not in the totals. */
  leadRow?: Row;
  /** From so many pixels on the rows scroll under the heading. */
  maxHeight?: number;
  foot?: ReactNode;
};

/** Above this many rows only those in view are in the page. */
const virtualFrom = 120;

/** Rows to read, sort and total, thousands without lag, under a heading that stays. */
export const DataTable = <Row extends object>(props: DataTableProps<Row>) => {
  const { caption, rows, columns, rowKey, initialSort, rowHeight = 40, maxHeight, foot } = props;
  const table = useDataTable({ rows, columns, rowKey, initialSort });
  const sorted = table.getRowModel().rows;
  const scroller = useRef<HTMLDivElement>(null);
  const isVirtual = sorted.length > virtualFrom;
  const virtualizer = useVirtualizer({
    count: sorted.length,
    getScrollElement: () => scroller.current,
    estimateSize: () => rowHeight,
    overscan: 12,
    enabled: isVirtual,
    initialRect: { width: 800, height: maxHeight ?? 600 },
  });
  const windowed = virtualizer.getVirtualItems();
  const shown = isVirtual ? windowed.map((item) => sorted[item.index]) : sorted;
  const before = isVirtual ? (windowed[0]?.start ?? 0) : 0;
  const after = isVirtual ? virtualizer.getTotalSize() - (windowed.at(-1)?.end ?? 0) : 0;
  const firstIndex = isVirtual ? (windowed[0]?.index ?? 0) : 0;
  const leadRows = props.leadRow ? 1 : 0;
  const height = maxHeight ?? (isVirtual ? 600 : undefined);

  return (
    <div
      ref={scroller}
      role="region"
      aria-label={caption}
      tabIndex={0}
      className="overflow-auto rounded-lg focus-visible:-outline-offset-2 print:overflow-visible"
      style={height ? { maxHeight: height } : undefined}
    >
      <table className="w-full border-separate border-spacing-0" aria-rowcount={sorted.length + leadRows + 1}>
        <caption className="sr-only">{caption}</caption>
        <colgroup>
          {columns.map((column) => (
            <col
              key={column.id}
              className={hiddenBelow(column)}
              style={column.width ? { width: column.width } : undefined}
            />
          ))}
        </colgroup>
        <thead className="sticky top-0 z-10 bg-sheet">
          <tr>
            {columns.map((column) => {
              const own = table.getColumn(column.id);
              return (
                <ColumnHeading
                  key={column.id}
                  column={column}
                  sorted={own?.getIsSorted() ?? false}
                  onSort={own?.getCanSort() ? () => own.toggleSorting() : undefined}
                />
              );
            })}
          </tr>
        </thead>
        <tbody>
          {props.leadRow && (
            <BodyRow
              columns={columns}
              row={props.leadRow}
              id={rowKey(props.leadRow)}
              index={0}
              rowHeight={rowHeight}
              isLead
            />
          )}
          {before > 0 && <Gap height={before} />}
          {shown.map((row, index) => (
            <BodyRow
              key={row.id}
              {...props}
              row={row.original}
              id={row.id}
              index={firstIndex + index + leadRows}
              rowHeight={rowHeight}
            />
          ))}
          {after > 0 && <Gap height={after} />}
        </tbody>
        {columns.some((column) => column.total) && (
          <tfoot className="sticky bottom-0 bg-sheet">
            <tr>
              {columns.map((column) => (
                <td
                  key={column.id}
                  className={classNames(
                    "border-t border-control px-3 py-2 font-semibold first:pl-4 last:pr-4 sm:first:pl-5 sm:last:pr-5",
                    columnClass(column),
                  )}
                >
                  {column.total?.(sorted.map((row) => row.original))}
                </td>
              ))}
            </tr>
          </tfoot>
        )}
      </table>
      {foot}
    </div>
  );
};

const Gap = ({ height }: { height: number }) => (
  <tr aria-hidden="true">
    <td style={{ height }} />
  </tr>
);

type BodyRowProps<Row> = Pick<DataTableProps<Row>, "columns" | "selectedKey" | "onRowClick"> & {
  row: Row;
  id: string;
  index: number;
  rowHeight: number;
  isLead?: boolean;
};

const BodyRow = <Row extends object>({
  columns,
  selectedKey,
  onRowClick,
  row,
  id,
  index,
  rowHeight,
  isLead,
}: BodyRowProps<Row>) => (
  <tr
    aria-rowindex={index + 2}
    aria-selected={selectedKey === undefined ? undefined : selectedKey === id}
    data-row={id}
    onClick={onRowClick && (() => onRowClick(row))}
    className={classNames(
      "group/row",
      onRowClick && "cursor-pointer hover:bg-hover",
      isLead && "font-semibold",
      selectedKey === id && "bg-accent-soft",
    )}
  >
    {columns.map((column) => (
      <td
        key={column.id}
        style={{ height: rowHeight }}
        className={classNames(
          "border-b border-hairline px-3 py-1 first:pl-4 last:pr-4 sm:first:pl-5 sm:last:pr-5 group-last/row:border-b-0",
          columnClass(column),
        )}
      >
        {column.cell ? column.cell(row) : column.value(row)}
      </td>
    ))}
  </tr>
);
