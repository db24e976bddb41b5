import { useInfiniteQuery, useQuery } from "@tanstack/react-query";
import { useMemo } from "react";
import { useNavigate } from "react-router-dom";
import { Button } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { EmptyState } from "@/components/ui/empty-state";
import { ErrorState } from "@/components/ui/error-state";
import { LinkButton } from "@/components/ui/link-button";
import { Sheet } from "@/components/ui/sheet";
import { LoadingState } from "@/components/ui/skeleton";
import { TextLink } from "@/components/ui/text-link";
import { productsQuery } from "@/lib/catalogue";
import { useChainFormat } from "@/lib/format/chain-format";
import type { ChainFormat } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";
import { usePermission } from "@/lib/session";
import { scenariosQuery } from "../api/scenarios-list";
import type { ScenarioListItem } from "../api/scenarios-list";

/** Every scenario of the chain, last changed first. */
export const ScenarioList = () => {
  const format = useChainFormat();
  const navigate = useNavigate();
  const mayWrite = usePermission("scenarios:write");
  const scenarios = useInfiniteQuery(scenariosQuery());
  const products = useQuery(productsQuery());
  const names = useMemo(() => new Map(products.data?.map((product) => [product.code, product.name])), [products.data]);
  const columns = useMemo(() => columnsOf(format, names), [format, names]);

  if (scenarios.isPending) return <LoadingState label="Reading the scenarios" />;
  if (scenarios.isError) {
    return <ErrorState error={scenarios.error} title="The scenarios could not be read." onRetry={() => void scenarios.refetch()} />;
  }
  const rows = scenarios.data.pages.flatMap((page) => page.items);
  if (rows.length === 0) {
    return (
      <Sheet>
        <EmptyState
          title="No scenario yet"
          action={
            mayWrite && (
              <LinkButton tone="primary" to={paths.newScenario.href()}>
                New scenario
              </LinkButton>
            )
          }
        >
          A scenario answers what happens when some stores sell a product at another price, with a promotion, in some weeks, before anyone commits.
        </EmptyState>
      </Sheet>
    );
  }
  return (
    <Sheet flush>
      <DataTable
        caption="Scenarios"
        rows={rows}
        columns={columns}
        rowKey={(row) => row.id}
        onRowClick={(row) => void navigate(paths.scenario.href(row.id))}
      />
      {scenarios.hasNextPage && (
        <div className="p-3 text-center">
          <Button busy={scenarios.isFetchingNextPage} onClick={() => void scenarios.fetchNextPage()}>
            Show more
          </Button>
        </div>
      )}
    </Sheet>
  );
};

const columnsOf = (format: ChainFormat, names: ReadonlyMap<string, string>): TableColumn<ScenarioListItem>[] => [
  {
    id: "name",
    header: "Scenario",
    value: (row) => row.name,
    cell: (row) => <TextLink to={paths.scenario.href(row.id)}>{row.name}</TextLink>,
  },
  { id: "product", header: "Product", value: (row) => names.get(row.product) ?? row.product, from: "sm" },
  { id: "stores", header: "Stores", value: (row) => row.stores.length, align: "right", from: "md" },
  {
    id: "weeks",
    header: "Weeks",
    value: (row) => row.weeks.first,
    cell: (row) => format.weekSpan(row.weeks.first, row.weeks.last),
    from: "md",
  },
  { id: "state", header: "State", value: (row) => row.state },
  { id: "whose", header: "Begun by", value: (row) => row.createdBy.name, from: "md" },
  { id: "by", header: "Changed by", value: (row) => row.updatedBy.name, from: "lg" },
  { id: "at", header: "Changed", value: (row) => row.updatedAt, cell: (row) => format.moment(row.updatedAt), align: "right", from: "sm" },
];
