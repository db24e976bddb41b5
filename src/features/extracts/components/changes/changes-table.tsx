import type { ExtractChanges } from "@shared/contract/extracts";
import { DataTable } from "@/components/ui/data-table";
import { sumOf } from "@/components/ui/data-table-columns";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { useChainFormat } from "@/lib/format/chain-format";
import type { ChainFormat } from "@/lib/format/chain-format";
import { DifferenceBar } from "./difference-bar";

type Week = ExtractChanges["weeks"][number];
type Count = "new" | "changed" | "same" | "missing";

const meanings: Partial<Record<Count, string>> = {
  same: "Rows that are loaded already, exactly as they stand in the file.",
  missing: "Rows loaded for this week and the file’s stores that the file does not have. They stay.",
};

const countColumn = (id: Count, header: string, format: ChainFormat): TableColumn<Week> => ({
  id,
  header,
  meaning: meanings[id],
  value: (week) => week[id],
  cell: (week) => (week[id] === 0 ? <span className="text-muted">0</span> : format.number(week[id])),
  total: (weeks) => format.number(sumOf(weeks, (week) => week[id])),
  align: "right",
  from: id === "same" ? "md" : id === "missing" ? "sm" : undefined,
});

const change = ({ unitsBefore, unitsAfter }: Week) => unitsAfter - unitsBefore;

const columnsFor = (format: ChainFormat, most: number): TableColumn<Week>[] => [
  {
    id: "week",
    header: "Week",
    value: (week) => week.week,
    cell: ({ week }) => (
      <>
        <span className="inline-block font-medium whitespace-nowrap first-letter:uppercase">{format.weekSpan(week, week)}</span>
        <span className="ml-3 text-sm whitespace-nowrap text-muted max-lg:hidden">{format.weekDays(week, { year: false })}</span>
      </>
    ),
    total: () => "All weeks",
  },
  countColumn("new", "New", format),
  countColumn("changed", "Changed", format),
  countColumn("same", "Same", format),
  countColumn("missing", "Missing", format),
  {
    id: "units",
    header: "Units",
    meaning: "Units of the file’s rows: as they are loaded now, and as the file has them.",
    value: (week) => week.unitsAfter,
    cell: (week) => (
      <span className="whitespace-nowrap">
        <span className="text-muted">{format.units(week.unitsBefore)} →</span> {format.units(week.unitsAfter)}
      </span>
    ),
    total: (weeks) => (
      <span className="whitespace-nowrap">
        {format.units(sumOf(weeks, (week) => week.unitsBefore))} → {format.units(sumOf(weeks, (week) => week.unitsAfter))}
      </span>
    ),
    align: "right",
    from: "sm",
  },
  {
    id: "difference",
    header: "Difference",
    value: change,
    cell: (week) => (
      <span className="inline-flex items-center gap-3 whitespace-nowrap">
        <span className="max-sm:hidden">
          <DifferenceBar difference={change(week)} most={most} />
        </span>
        <span className="min-w-12 text-right">{format.units(change(week), { signed: true })}</span>
      </span>
    ),
    total: (weeks) => format.units(sumOf(weeks, change), { signed: true }),
    align: "right",
  },
];

/** Week by week what a load does to rows and units. */
export const ChangesTable = ({ weeks }: { weeks: readonly Week[] }) => {
  const format = useChainFormat();
  const most = Math.max(0, ...weeks.map((week) => Math.abs(change(week))));
  return (
    <DataTable
      caption="Changes by week"
      rows={weeks}
      columns={columnsFor(format, most)}
      rowKey={(week) => week.week}
      initialSort={{ column: "week", descending: true }}
      maxHeight={420}
    />
  );
};
