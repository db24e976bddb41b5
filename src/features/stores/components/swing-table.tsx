import { useMemo } from "react";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { useChainFormat } from "@/lib/format/chain-format";
import type { Swing } from "../view/curve-swing";
import { StoreTable } from "./store-table";
import type { StoreRow } from "./store-table";

export type SwingRow = StoreRow & { swing: Swing | null };

type SwingTableProps = {
  rows: readonly SwingRow[];
  chain: SwingRow | null;
  formatX: (x: number) => string;
  selected: string | null;
  onSelect: (id: string) => void;
};

/** For drivers without an elasticity: where each store's demand is highest, and how far it swings. */
export const SwingTable = ({ rows, chain, formatX, selected, onSelect }: SwingTableProps) => {
  const format = useChainFormat();
  const columns = useMemo<TableColumn<SwingRow>[]>(
    () => [
      {
        id: "highest",
        header: "Highest at",
        value: (row) => row.swing?.highestAt ?? null,
        cell: (row) => row.swing && formatX(row.swing.highestAt),
        align: "right",
      },
      {
        id: "swing",
        header: "Swing",
        meaning: "Demand at the curve's highest point, in times its lowest, within what the store has seen.",
        value: (row) => row.swing?.ratio ?? null,
        cell: (row) => row.swing && format.multiplier(row.swing.ratio),
        align: "right",
      },
    ],
    [format, formatX],
  );
  return (
    <StoreTable
      caption="Stores by how much the driver moves demand"
      rows={rows}
      chain={chain}
      columns={columns}
      initialSort={{ column: "swing", descending: true }}
      selected={selected}
      onSelect={onSelect}
    />
  );
};
