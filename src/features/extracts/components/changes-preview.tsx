import { useQuery } from "@tanstack/react-query";
import type { ExtractChanges } from "@shared/contract/extracts";
import { DataTable } from "@/components/ui/data-table";
import { sumOf } from "@/components/ui/data-table-columns";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { TextLink } from "@/components/ui/text-link";
import { useChainFormat } from "@/lib/format/chain-format";
import type { ChainFormat } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";
import { extractChangesQuery } from "../api/extract-changes";
import { changesSentence } from "../view/changes-summary";

type Week = ExtractChanges["weeks"][number];

const countColumn = (id: "new" | "changed" | "same", header: string, format: ChainFormat): TableColumn<Week> => ({
  id,
  header,
  value: (week) => week[id],
  cell: (week) => (week[id] === 0 ? <span className="text-muted">0</span> : format.number(week[id])),
  total: (weeks) => format.number(sumOf(weeks, (week) => week[id])),
  align: "right",
  from: id === "same" ? "sm" : undefined,
});

const columnsFor = (format: ChainFormat): TableColumn<Week>[] => [
  {
    id: "week",
    header: "Week",
    value: (week) => week.week,
    cell: ({ week }) => (
      <>
        <span className="inline-block font-medium whitespace-nowrap first-letter:uppercase">
          {format.weekSpan(week, week)}
        </span>
        <span className="ml-3 text-sm text-muted max-md:hidden">{format.weekDays(week, { year: false })}</span>
      </>
    ),
    total: () => "All weeks",
  },
  countColumn("new", "New rows", format),
  countColumn("changed", "Changed", format),
  countColumn("same", "Same", format),
  {
    id: "before",
    header: "Units before",
    value: (week) => week.unitsBefore,
    cell: (week) => format.units(week.unitsBefore),
    total: (weeks) => format.units(sumOf(weeks, (week) => week.unitsBefore)),
    align: "right",
    from: "md",
  },
  {
    id: "after",
    header: "Units after",
    value: (week) => week.unitsAfter,
    cell: (week) => format.units(week.unitsAfter),
    total: (weeks) => format.units(sumOf(weeks, (week) => week.unitsAfter)),
    align: "right",
    from: "sm",
  },
];

/** What loading would change, or has changed, week by week. */
export const ChangesPreview = ({ extractId, isLoaded }: { extractId: string; isLoaded: boolean }) => {
  const query = useQuery(extractChangesQuery(extractId));
  const format = useChainFormat();
  return (
    <Sheet flush heading={isLoaded ? "What loading changed" : "What loading would change"}>
      <QueryView
        query={query}
        loading="Comparing with what is there"
        failure="The comparison could not be made"
        skeleton={<div className="h-24" role="status" aria-label="Comparing with what is there" />}
      >
        {(changes) => (
          <>
            <p className="px-4 pb-4 text-muted sm:px-5">
              {changesSentence(changes, isLoaded)}
              {isLoaded && (
                <>
                  {" Curves take them in when a planner or category manager fits anew under "}
                  <TextLink to={paths.drivers.href()}>Drivers</TextLink>.
                </>
              )}
            </p>
            {changes.weeks.length > 0 && (
              <div className="border-t border-hairline">
                <DataTable
                  caption="Changes by week"
                  rows={changes.weeks}
                  columns={columnsFor(format)}
                  rowKey={(week) => week.week}
                  initialSort={{ column: "week", descending: true }}
                  maxHeight={420}
                />
              </div>
            )}
          </>
        )}
      </QueryView>
    </Sheet>
  );
};
