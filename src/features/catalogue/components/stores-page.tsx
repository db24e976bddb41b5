import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import type { Store } from "@shared/contract/catalogue";
import { exportStores } from "@shared/contract/catalogue-stores";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { EmptyState } from "@/components/ui/empty-state";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { SelectField } from "@/components/ui/select-field";
import { Sheet } from "@/components/ui/sheet";
import { Tag } from "@/components/ui/tag";
import { TextField } from "@/components/ui/text-field";
import { storesQuery } from "@/lib/catalogue";
import { useChainFormat, type ChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import { usePermission } from "@/lib/session";
import { useFilters } from "@/lib/use-filters";
import { regionsOf } from "../view/regions";
import { holdsWords } from "../view/search";
import { CatalogueActions } from "./catalogue-actions";
import { CatalogueViews } from "./catalogue-views";
import { KindHistory } from "./change-history";
import { RowButton } from "./row-button";
import { StoreDialog } from "./store-dialog";

const columnsOf = (format: ChainFormat, open: (code: string) => void): TableColumn<Store>[] => [
  { id: "code", header: "Code", value: ({ code }) => code, width: "8rem" },
  { id: "name", header: "Name", value: ({ name }) => name, cell: ({ code, name }) => <RowButton onPress={() => open(code)}>{name}</RowButton> },
  { id: "region", header: "Region", value: ({ region }) => region },
  { id: "opened", header: "First day of trade", value: ({ opened }) => opened, cell: ({ opened }) => format.day(opened), from: "sm" },
  {
    id: "closed", header: "Last day of trade", value: ({ closed }) => closed,
    cell: ({ closed }) => (closed === null ? "" : <Tag tone="caution">{format.day(closed)}</Tag>),
  },
];

/** Every store, to be found, entered and changed. */
export const StoresPage = () => {
  const query = useQuery(storesQuery());
  const mayWrite = usePermission("catalogue:write");
  const [open, setOpen] = useState<{ code: string | null } | null>(null);
  const stores = query.data ?? [];
  const regions = regionsOf(stores);
  return (
    <>
      <PageHeader
        title="Stores in the catalogue" heading="Catalogue"
        facts={query.data ? [countOf(stores.length, "store"), countOf(regions.length, "region")] : []}
        actions={<CatalogueActions files={[{ label: "Stores", href: exportStores.path, name: "stores.csv" }]} mayWrite={mayWrite} enter={{ label: "Enter a store", onEnter: () => setOpen({ code: null }) }} />}
      />
      <CatalogueViews />
      <Sheet flush>
        <QueryView
          query={query} loading="Reading the stores" failure="The stores could not be read"
          isEmpty={(all) => all.length === 0}
          empty={
            <EmptyState title="There is no store yet">
              {mayWrite ? "Upload a stores file under Files, or enter the first one by hand." : "Your data admin enters the stores."}
            </EmptyState>
          }
        >
          {(all) => <StoreTable stores={all} regions={regions} onOpen={(code) => setOpen({ code })} />}
        </QueryView>
      </Sheet>
      <KindHistory kind="store" />
      {open !== null && (
        <StoreDialog
          store={stores.find(({ code }) => code === open.code) ?? null} regions={regions} isReadOnly={!mayWrite} onClose={() => setOpen(null)}
        />
      )}
    </>
  );
};

type StoreTableProps = { stores: readonly Store[]; regions: readonly string[]; onOpen: (code: string) => void };

const StoreTable = ({ stores, regions, onOpen }: StoreTableProps) => {
  const format = useChainFormat();
  const { values, set } = useFilters(["q", "region", "trade"]);
  const columns = useMemo(() => columnsOf(format, onOpen), [format, onOpen]);
  const shown = useMemo(
    () => stores.filter(({ code, name, region, closed }) =>
      holdsWords(values.q, [code, name]) && (values.region === "" || region === values.region) && (values.trade === "" || (closed !== null) === (values.trade === "closed"))),
    [stores, values.q, values.region, values.trade],
  );
  return (
    <>
      <div className="grid gap-3 border-b border-hairline p-4 sm:grid-cols-[minmax(12rem,20rem)_12rem_12rem] sm:px-5">
        <TextField type="search" label="Code or name" value={values.q} onChange={({ target }) => set({ q: target.value })} />
        <SelectField
          label="Region" value={values.region} onChange={(region) => set({ region })}
          choices={[{ value: "", label: "All" }, ...regions.map((region) => ({ value: region, label: region }))]}
        />
        <SelectField
          label="Trade" value={values.trade} onChange={(trade) => set({ trade })}
          choices={[{ value: "", label: "All" }, { value: "open", label: "Without a last day" }, { value: "closed", label: "With a last day" }]}
        />
      </div>
      {shown.length === 0 ? (
        <EmptyState title="No store is like that">Change the filters above.</EmptyState>
      ) : (
        <DataTable caption="Stores" rows={shown} columns={columns} rowKey={({ code }) => code} initialSort={{ column: "code", descending: false }} />
      )}
    </>
  );
};
