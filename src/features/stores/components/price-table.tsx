import { useMemo } from "react";
import { IntervalMark } from "@/components/charts/interval-mark";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { useChainFormat } from "@/lib/format/chain-format";
import type { ChainFormat } from "@/lib/format/chain-format";
import { formatPercent } from "@/lib/format/percent";
import { intervalDomain } from "../view/interval-domain";
import { StoreTable } from "./store-table";
import type { StoreRow } from "./store-table";

export type PriceRow = StoreRow & { elasticity: { estimate: number; lower: number; upper: number } | null };

type PriceTableProps = {
  rows: readonly PriceRow[];
  chain: PriceRow | null;
  level: number;
  selected: string | null;
  onSelect: (id: string) => void;
};

/** Below this a price rise costs more units than it brings in price. */
const unitElastic = -1;

const columnsFor = (format: ChainFormat, domain: [number, number], level: number): TableColumn<PriceRow>[] => [
  {
    id: "interval",
    header: `${formatPercent(level)} interval`,
    value: (row) => row.elasticity?.estimate ?? null,
    cell: (row) =>
      row.elasticity && (
        <IntervalMark {...row.elasticity} domain={domain} group={row.group} reference={unitElastic} width={120} />
      ),
    sortable: false,
    width: "9rem",
    from: "sm",
  },
  {
    id: "elasticity",
    header: "Elasticity",
    meaning:
      "By how many percent units change when the price rises by one percent, at the anchor price. The mark in each row is −1: beyond it a higher price sells for less in all.",
    value: (row) => row.elasticity?.estimate ?? null,
    cell: (row) =>
      row.elasticity && (
        <span className="whitespace-nowrap">
          {format.number(row.elasticity.estimate, { digits: 1 })}{" "}
          <span className="text-sm font-normal text-muted max-sm:block">
            {format.number(row.elasticity.lower, { digits: 1 })} to {format.number(row.elasticity.upper, { digits: 1 })}
          </span>
        </span>
      ),
    align: "right",
  },
];

export const PriceTable = ({ rows, chain, level, selected, onSelect }: PriceTableProps) => {
  const format = useChainFormat();
  const columns = useMemo(() => {
    const domain = intervalDomain(
      rows.flatMap((row) => row.elasticity ?? []),
      unitElastic,
    );
    return columnsFor(format, domain, level);
  }, [rows, format, level]);
  return (
    <StoreTable
      caption="Stores by price elasticity"
      rows={rows}
      chain={chain}
      columns={columns}
      initialSort={{ column: "elasticity", descending: false }}
      selected={selected}
      onSelect={onSelect}
    />
  );
};
