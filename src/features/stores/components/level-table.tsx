import { useMemo } from "react";
import type { TableColumn } from "@/components/ui/data-table-columns";
import type { DotLevel } from "@/components/charts/level-dots/level-dots";
import { useChainFormat } from "@/lib/format/chain-format";
import { formatPercentInterval } from "@/lib/format/percent";
import { StoreTable } from "./store-table";
import type { StoreRow } from "./store-table";

type LevelTableProps = {
  rows: readonly StoreRow[];
  chain: StoreRow | null;
  levels: readonly DotLevel[];
  selected: string | null;
  onSelect: (id: string) => void;
};

/** Each level's lift in each store, with its interval. */
export const LevelTable = ({ rows, chain, levels, selected, onSelect }: LevelTableProps) => {
  const format = useChainFormat();
  const columns = useMemo<TableColumn<StoreRow>[]>(
    () =>
      levels.map((level) => {
        const dots = new Map(level.dots.map((dot) => [dot.id, dot]));
        const estimateOf = (row: StoreRow) => (row.group === null ? level.chain : (dots.get(row.id)?.estimate ?? null));
        return {
          id: level.value,
          header: level.label,
          value: estimateOf,
          cell: (row) => {
            const estimate = estimateOf(row);
            const dot = dots.get(row.id);
            if (estimate === null) return <span className="text-muted">not seen</span>;
            return (
              <span className="whitespace-nowrap">
                {format.percent(estimate - 1, { signed: true })}{" "}
                {dot && (
                  <span className="text-sm text-muted">{formatPercentInterval(dot.lower - 1, dot.upper - 1)}</span>
                )}
              </span>
            );
          },
          align: "right",
        };
      }),
    [levels, format],
  );
  return (
    <StoreTable
      caption="Stores by lift of each promotion"
      rows={rows}
      chain={chain}
      columns={columns}
      initialSort={{ column: levels[0]?.value ?? "store", descending: true }}
      selected={selected}
      onSelect={onSelect}
    />
  );
};
