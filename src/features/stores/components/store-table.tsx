import type { ReactNode } from "react";
import { GroupMark } from "@/components/charts/parts/group-shape";
import type { StoreGroup } from "@/components/charts/parts/group-shape";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn, TableSort } from "@/components/ui/data-table-columns";
import { useChainFormat } from "@/lib/format/chain-format";

/** A store, or the whole chain, as the table has it. */
export type StoreRow = {
  id: string;
  name: string;
  region: string;
  group: StoreGroup | null;
  meanWeeklyUnits: number;
};

type StoreTableProps<Row extends StoreRow> = {
  caption: string;
  rows: readonly Row[];
  chain: Row | null;
  /** What the driver shows of each store. */
  columns: readonly TableColumn<Row>[];
  initialSort: TableSort;
  selected: string | null;
  onSelect: (id: string) => void;
  foot?: ReactNode;
};

/** Stores ranked by what the driver does in each, the chain first. */
export const StoreTable = <Row extends StoreRow>(props: StoreTableProps<Row>) => {
  const format = useChainFormat();
  const columns: TableColumn<Row>[] = [
    {
      id: "store",
      header: "Store",
      value: (row) => row.name,
      cell: (row) => (
        <span className="flex items-center gap-2.5">
          {row.group === null ? (
            <span className="h-0.5 w-3 bg-ink" aria-hidden="true" />
          ) : (
            <GroupMark group={row.group} />
          )}
          {row.group === null ? (
            row.name
          ) : (
            <button
              type="button"
              className="rounded-xs text-left font-medium whitespace-nowrap"
              aria-pressed={row.id === props.selected}
              onClick={() => props.onSelect(row.id)}
            >
              {row.name}
            </button>
          )}
        </span>
      ),
    },
    ...props.columns,
    {
      id: "units",
      header: "Units",
      meaning: "Mean units a week in the weeks the model was learnt from.",
      value: (row) => row.meanWeeklyUnits,
      cell: (row) => format.units(row.meanWeeklyUnits),
      align: "right",
      width: "4.75rem",
    },
  ];
  return (
    <DataTable
      caption={props.caption}
      rows={props.rows}
      columns={columns}
      rowKey={(row) => row.id}
      leadRow={props.chain ?? undefined}
      initialSort={props.initialSort}
      selectedKey={props.selected}
      onRowClick={(row) => props.onSelect(row.id)}
      rowHeight={34}
      maxHeight={1010}
      foot={props.foot}
    />
  );
};
