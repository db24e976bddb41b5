import { zodResolver } from "@hookform/resolvers/zod";
import { useQuery } from "@tanstack/react-query";
import { Plus } from "lucide-react";
import { useState } from "react";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import type { Product } from "@shared/contract/catalogue";
import { changedTermsSchema, type ProductTerms } from "@shared/contract/catalogue-products";
import { daySchema } from "@shared/contract/common";
import { Button } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { QueryView } from "@/components/ui/query-view";
import { Sheet } from "@/components/ui/sheet";
import { useChainFormat, type ChainFormat } from "@/lib/format/chain-format";
import { useRefresh } from "../api/refresh";
import { removeTerms, saveTerms, termsQuery } from "../api/terms";
import { beginning, exactMoney, fromWords, taxWords } from "../view/product-words";
import { FormDialog } from "./form-dialog";
import { FormDay, FormNumber } from "./form-fields";
import { RowButton } from "./row-button";
import { TermsChart } from "./terms-chart";

const columnsOf = (format: ChainFormat, open?: (validFrom: string) => void): TableColumn<ProductTerms>[] => [
  {
    id: "validFrom", header: "Valid from", value: ({ validFrom }) => validFrom,
    cell: (row) => (open ? <RowButton onPress={() => open(row.validFrom)}>{fromWords(row, format)}</RowButton> : fromWords(row, format)),
  },
  {
    id: "regularPrice", header: "Regular price", align: "right", value: ({ regularPrice }) => regularPrice,
    cell: ({ regularPrice }) => exactMoney(regularPrice, format),
  },
  { id: "unitCost", header: "Cost", align: "right", value: ({ unitCost }) => unitCost, cell: ({ unitCost }) => exactMoney(unitCost, format) },
  { id: "taxRate", header: "Tax", align: "right", value: ({ taxRate }) => taxRate, from: "sm", cell: ({ taxRate }) => taxWords(taxRate, format) },
];

type TermsSheetProps = { product: Product; today: string; mayWrite: boolean };

/** A product's cost, regular price and tax by date: as steps, and as rows to change. */
export const TermsSheet = ({ product, today, mayWrite }: TermsSheetProps) => {
  const query = useQuery(termsQuery(product.code));
  const format = useChainFormat();
  const [open, setOpen] = useState<{ validFrom: string | null } | null>(null);
  const columns = columnsOf(format, mayWrite ? (validFrom) => setOpen({ validFrom }) : undefined);
  return (
    <Sheet
      flush heading="Cost, price and tax"
      actions={mayWrite && <Button size="small" onClick={() => setOpen({ validFrom: null })}><Plus aria-hidden="true" /> From another day</Button>}
    >
      <QueryView query={query} loading="Reading the terms" failure="The terms could not be read">
        {(terms) => (
          <>
            <div className="px-4 pb-4 sm:px-5"><TermsChart terms={terms} today={today} name={product.name} /></div>
            <div className="border-t border-hairline">
              <DataTable
                caption="Cost, price and tax by date" rows={terms} columns={columns} rowKey={({ validFrom }) => validFrom}
                initialSort={{ column: "validFrom", descending: true }}
              />
            </div>
            {open && <TermsDialog code={product.code} terms={terms.find(({ validFrom }) => validFrom === open.validFrom) ?? null} newest={terms.at(-1)} isOnly={terms.length === 1} onClose={() => setOpen(null)} />}
          </>
        )}
      </QueryView>
    </Sheet>
  );
};

const schema = changedTermsSchema.extend({ validFrom: daySchema });
type Input = z.input<typeof schema>;
type Output = z.output<typeof schema>;
const fields = ["validFrom", "unitCost", "regularPrice", "taxRate"];

type TermsDialogProps = { code: string; terms: ProductTerms | null; newest?: ProductTerms; isOnly: boolean; onClose: () => void };

const TermsDialog = ({ code, terms, newest, isOnly, onClose }: TermsDialogProps) => {
  const refresh = useRefresh();
  const format = useChainFormat();
  const blank = { validFrom: "", unitCost: newest?.unitCost ?? null, regularPrice: newest?.regularPrice ?? null, taxRate: newest?.taxRate ?? 0 };
  const form = useForm<Input, unknown, Output>({
    resolver: zodResolver(schema), defaultValues: blank, values: terms ?? undefined, resetOptions: { keepDirtyValues: true },
  });
  const { control } = form;
  return (
    <FormDialog
      title={terms ? `From ${fromWords(terms, format)}` : "What holds from another day"} form={form} fields={fields} onClose={onClose}
      refresh={() => refresh("terms", "products")}
      save={async ({ validFrom, ...values }) => {
        await saveTerms({ code, validFrom, version: terms?.version ?? null }, values);
        return "The terms are saved.";
      }}
      remove={terms && !isOnly ? {
        sentence: terms.validFrom === beginning ? "Before the next day nothing is known then." : "What held before goes on then.",
        act: async () => {
          await removeTerms({ code, ...terms });
          return "The terms are removed.";
        },
      } : undefined}
    >
      {!terms && <FormDay control={control} name="validFrom" label="Valid from" hint="Until the next such day." />}
      <div className="grid gap-4 sm:grid-cols-3">
        <FormNumber control={control} name="unitCost" label="Cost, net of tax" />
        <FormNumber control={control} name="regularPrice" label="Regular price" />
        <FormNumber control={control} name="taxRate" label="Tax" unit={0.01} suffix=" %" step={1} empty={0} />
      </div>
    </FormDialog>
  );
};
