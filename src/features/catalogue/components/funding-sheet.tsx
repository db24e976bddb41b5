import { zodResolver } from "@hookform/resolvers/zod";
import { useQuery } from "@tanstack/react-query";
import { Plus } from "lucide-react";
import { useState } from "react";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import { newFundingSchema, type Funding } from "@shared/contract/catalogue-funding";
import { Button } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { EmptyState } from "@/components/ui/empty-state";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { useChainFormat, type ChainFormat } from "@/lib/format/chain-format";
import { changeFunding, enterFunding, fundingQuery, removeFunding } from "../api/funding";
import { useRefresh } from "../api/refresh";
import { exactMoney } from "../view/product-words";
import { FormDialog } from "./form-dialog";
import { FormDay, FormNumber } from "./form-fields";
import { RowButton } from "./row-button";

const columnsOf = (format: ChainFormat, open?: (firstDay: string) => void): TableColumn<Funding>[] => [
  {
    id: "firstDay", header: "First day", value: ({ firstDay }) => firstDay,
    cell: ({ firstDay }) => (open ? <RowButton onPress={() => open(firstDay)}>{format.day(firstDay)}</RowButton> : format.day(firstDay)),
  },
  { id: "lastDay", header: "Last day", value: ({ lastDay }) => lastDay, cell: ({ lastDay }) => format.day(lastDay) },
  { id: "perUnit", header: "Per unit", align: "right", value: ({ perUnit }) => perUnit, cell: ({ perUnit }) => exactMoney(perUnit, format) },
  { id: "lumpSum", header: "Lump sum", align: "right", value: ({ lumpSum }) => lumpSum, cell: ({ lumpSum }) => format.money(lumpSum) },
];

/** What suppliers give for a product. */
export const FundingSheet = ({ product, mayWrite }: { product: string; mayWrite: boolean }) => {
  const query = useQuery(fundingQuery(product));
  const format = useChainFormat();
  const [open, setOpen] = useState<{ firstDay: string | null } | null>(null);
  const columns = columnsOf(format, mayWrite ? (firstDay) => setOpen({ firstDay }) : undefined);
  return (
    <Sheet
      flush heading="Funding by suppliers"
      actions={mayWrite && <Button size="small" onClick={() => setOpen({ firstDay: null })}><Plus aria-hidden="true" /> Enter funding</Button>}
    >
      <QueryView
        query={query} loading="Reading the funding" failure="The funding could not be read" isEmpty={(all) => all.length === 0 && open === null}
        empty={<EmptyState title="No supplier gives anything">What a supplier contributes to a promotion, per unit or as a lump sum, counts in its margin.</EmptyState>}
      >
        {(all) => (
          <>
            {all.length > 0 && <DataTable caption="Funding" rows={all} columns={columns} rowKey={({ firstDay }) => firstDay} initialSort={{ column: "firstDay", descending: true }} />}
            {open && <FundingDialog product={product} funding={all.find(({ firstDay }) => firstDay === open.firstDay) ?? null} onClose={() => setOpen(null)} />}
          </>
        )}
      </QueryView>
    </Sheet>
  );
};

type Input = z.input<typeof newFundingSchema>;
type Output = z.output<typeof newFundingSchema>;
const fields = ["firstDay", "lastDay", "perUnit", "lumpSum"];

const FundingDialog = ({ product, funding, onClose }: { product: string; funding: Funding | null; onClose: () => void }) => {
  const refresh = useRefresh();
  const format = useChainFormat();
  const form = useForm<Input, unknown, Output>({
    resolver: zodResolver(newFundingSchema), defaultValues: { product, firstDay: "", lastDay: "", perUnit: 0, lumpSum: 0 },
    values: funding ?? undefined, resetOptions: { keepDirtyValues: true },
  });
  const { control } = form;
  return (
    <FormDialog
      title={funding ? `Funding from ${format.day(funding.firstDay)}` : "Enter funding"} form={form} fields={fields} onClose={onClose} refresh={() => refresh("funding")}
      save={async ({ lastDay, perUnit, lumpSum, firstDay }) => {
        await (funding ? changeFunding(funding, { lastDay, perUnit, lumpSum }) : enterFunding({ product, firstDay, lastDay, perUnit, lumpSum }));
        return "The funding is saved.";
      }}
      remove={funding ? {
        sentence: "Plans in these days are without it then.",
        act: async () => {
          await removeFunding(funding);
          return "The funding is removed.";
        },
      } : undefined}
    >
      <div className="grid gap-4 sm:grid-cols-2">
        {!funding && <FormDay control={control} name="firstDay" label="First day" />}
        <FormDay control={control} name="lastDay" label="Last day" />
        <FormNumber control={control} name="perUnit" label="Per unit sold, net of tax" empty={0} />
        <FormNumber control={control} name="lumpSum" label="Lump sum, net of tax" empty={0} step={100} />
      </div>
    </FormDialog>
  );
};
