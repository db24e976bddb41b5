import { zodResolver } from "@hookform/resolvers/zod";
import { useQuery } from "@tanstack/react-query";
import { Plus } from "lucide-react";
import { useState } from "react";
import { Controller, useForm } from "react-hook-form";
import { z } from "zod";
import type { Store } from "@shared/contract/catalogue";
import { newListingsSchema, type Listing } from "@shared/contract/catalogue-listings";
import { daySchema } from "@shared/contract/common";
import { Button } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { EmptyState } from "@/components/ui/empty-state";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { storesQuery } from "@/lib/catalogue";
import { useChainFormat, type ChainFormat } from "@/lib/format/chain-format";
import { endListing, enterListings, listingsQuery, removeListing } from "../api/listings";
import { useRefresh } from "../api/refresh";
import { FormDialog } from "./form-dialog";
import { FormDay } from "./form-fields";
import { RowButton } from "./row-button";
import { StorePicks } from "./store-picks";

type Named = Listing & { name: string; region: string };

const keyOf = ({ store, firstDay }: Listing) => `${store} ${firstDay}`;

const columnsOf = (format: ChainFormat, open?: (key: string) => void): TableColumn<Named>[] => [
  {
    id: "store", header: "Store", value: ({ store }) => store,
    cell: (row) => (open ? <RowButton onPress={() => open(keyOf(row))}>{row.store} {row.name}</RowButton> : `${row.store} ${row.name}`),
  },
  { id: "region", header: "Region", value: ({ region }) => region, from: "sm" },
  { id: "firstDay", header: "First day", value: ({ firstDay }) => firstDay, cell: ({ firstDay }) => format.day(firstDay) },
  {
    id: "lastDay", header: "Last day", value: ({ lastDay }) => lastDay,
    cell: ({ lastDay }) => (lastDay === null ? <span className="text-muted">goes on</span> : format.day(lastDay)),
  },
];

/** In which stores a product is, and when. */
export const ListingsSheet = ({ product, mayWrite }: { product: string; mayWrite: boolean }) => {
  const query = useQuery(listingsQuery(product));
  const stores = useQuery(storesQuery()).data ?? [];
  const format = useChainFormat();
  const [open, setOpen] = useState<{ key: string | null } | null>(null);
  const columns = columnsOf(format, mayWrite ? (key) => setOpen({ key }) : undefined);
  const byCode = new Map(stores.map((store) => [store.code, store]));
  const named = (query.data ?? []).map((row) => ({ ...row, name: byCode.get(row.store)?.name ?? "", region: byCode.get(row.store)?.region ?? "" }));
  const chosen = (query.data ?? []).find((row) => keyOf(row) === open?.key);
  return (
    <Sheet
      flush heading="Listings by store"
      actions={mayWrite && <Button size="small" onClick={() => setOpen({ key: null })}><Plus aria-hidden="true" /> List in stores</Button>}
    >
      <QueryView
        query={query} loading="Reading the listings" failure="The listings could not be read" isEmpty={(all) => all.length === 0}
        empty={<EmptyState title="No listing is known">Weeks without a row then count by what the source says of missing rows.</EmptyState>}
      >
        {() => <DataTable caption="Listings by store" rows={named} columns={columns} rowKey={keyOf} initialSort={{ column: "store", descending: false }} maxHeight={420} />}
      </QueryView>
      {open && chosen && <ListingDialog listing={chosen} onClose={() => setOpen(null)} />}
      {open?.key === null && <NewListingsDialog product={product} stores={stores} onClose={() => setOpen(null)} />}
    </Sheet>
  );
};

const endSchema = z.object({ firstDay: daySchema, lastDay: daySchema.nullable() })
  .refine(({ firstDay, lastDay }) => lastDay === null || lastDay >= firstDay, { path: ["lastDay"], message: "The last day lies before the first." });
type End = z.output<typeof endSchema>;

const ListingDialog = ({ listing, onClose }: { listing: Listing; onClose: () => void }) => {
  const refresh = useRefresh();
  const format = useChainFormat();
  const form = useForm<End>({ resolver: zodResolver(endSchema), values: { firstDay: listing.firstDay, lastDay: listing.lastDay }, resetOptions: { keepDirtyValues: true } });
  return (
    <FormDialog
      title={`${listing.store} from ${format.day(listing.firstDay)}`} form={form} fields={["lastDay"]} onClose={onClose} refresh={() => refresh("listings")}
      save={async ({ lastDay }) => {
        await endListing(listing, { lastDay });
        return "The listing is saved.";
      }}
      remove={{
        sentence: "As if the store had never had it.",
        act: async () => {
          await removeListing(listing);
          return "The listing is removed.";
        },
      }}
    >
      <FormDay control={form.control} name="lastDay" label="Last day" hint="Empty while it goes on." />
    </FormDialog>
  );
};

type Input = z.input<typeof newListingsSchema>;
type Output = z.output<typeof newListingsSchema>;

const NewListingsDialog = ({ product, stores, onClose }: { product: string; stores: readonly Store[]; onClose: () => void }) => {
  const refresh = useRefresh();
  const form = useForm<Input, unknown, Output>({ resolver: zodResolver(newListingsSchema), defaultValues: { product, stores: [], firstDay: "", lastDay: null } });
  return (
    <FormDialog
      title="List in stores" form={form} fields={["stores", "firstDay", "lastDay"]} onClose={onClose} refresh={() => refresh("listings")}
      save={async (listings) => {
        const { entered } = await enterListings(listings);
        return entered === 1 ? "It is listed in one store." : `It is listed in ${entered} stores.`;
      }}
    >
      <div className="grid gap-4 sm:grid-cols-2">
        <FormDay control={form.control} name="firstDay" label="First day" />
        <FormDay control={form.control} name="lastDay" label="Last day" hint="Empty while it goes on." />
      </div>
      <Controller
        control={form.control} name="stores"
        render={({ field: { value, onChange }, fieldState: { error } }) => <StorePicks stores={stores} chosen={value} onChange={onChange} error={error?.message ?? error?.root?.message} />}
      />
    </FormDialog>
  );
};
