import { zodResolver } from "@hookform/resolvers/zod";
import { useQuery } from "@tanstack/react-query";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import type { Product } from "@shared/contract/catalogue";
import { newProductSchema } from "@shared/contract/catalogue-products";
import { Checkbox } from "@/components/ui/checkbox";
import { categoriesQuery } from "../api/categories";
import { changeProduct, enterProduct, removeProduct } from "../api/product-changes";
import { useRefresh } from "../api/refresh";
import { FormDialog } from "./form-dialog";
import { FormNumber, FormSelect, FormText } from "./form-fields";

type Input = z.input<typeof newProductSchema>;
type Output = z.output<typeof newProductSchema>;

const fields = ["code", "name", "gtin", "brand", "category", "soldByWeight", "replaces", "replacesSizeRatio", "terms.unitCost", "terms.regularPrice", "terms.taxRate"];
const noTerms = { unitCost: null, regularPrice: null, taxRate: 0 };
const blank: Input = {
  code: "", name: "", gtin: null, brand: null, category: "", soldByWeight: false, replaces: null, replacesSizeRatio: null, terms: noTerms,
};

type ProductDialogProps = { product: Product | null; products: readonly Product[]; onClose: () => void; onRemoved?: () => void };

/** Enters a product, or changes what describes one. */
export const ProductDialog = ({ product, products, onClose, onRemoved }: ProductDialogProps) => {
  const refresh = useRefresh();
  const categories = useQuery(categoriesQuery()).data ?? [];
  const form = useForm<Input, unknown, Output>({
    resolver: zodResolver(newProductSchema), defaultValues: blank, values: product ? describedOf(product) : undefined, resetOptions: { keepDirtyValues: true },
  });
  const { control, register, watch } = form;
  const save = async ({ code, terms, ...described }: Output) => {
    await (product ? changeProduct(product, described) : enterProduct({ code, ...described, terms }));
    return `${described.name} is saved.`;
  };
  return (
    <FormDialog
      title={product ? `Change ${product.name}` : "Enter a product"} form={form} fields={fields} save={save} onClose={onClose}
      refresh={() => refresh("products", "categories", "terms")}
      remove={product ? {
        sentence: "Only a product that nothing refers to can be removed.",
        act: async () => {
          await removeProduct(product);
          onRemoved?.();
          return `${product.name} is removed.`;
        },
      } : undefined}
    >
      {!product && <FormText control={control} name="code" label="Code" hint="As files name it; it cannot be changed later." />}
      <FormText control={control} name="name" label="Name" />
      <div className="grid items-start gap-4 sm:grid-cols-2">
        <FormText
          control={control} name="category" label="Category" choices={categories.map(({ code }) => code)}
          hint="A new one is entered with it."
        />
        <FormText control={control} name="brand" label="Brand" optional />
        <FormText control={control} name="gtin" label="GTIN" optional hint="8, 12, 13 or 14 digits." />
        <div className="self-center"><Checkbox label="Sold by weight" {...register("soldByWeight")} /></div>
        <FormSelect
          control={control} name="replaces" label="Replaces"
          choices={[{ value: "", label: "No product" }, ...products.filter(({ code }) => code !== product?.code).map(({ code, name }) => ({ value: code, label: `${code} ${name}` }))]}
        />
        {watch("replaces") !== null && (
          <FormNumber control={control} name="replacesSizeRatio" label="Size ratio" hint="So many of the old one make one of this." step={0.05} />
        )}
      </div>
      {!product && (
        <div className="grid gap-4 border-t border-hairline pt-4 sm:grid-cols-3">
          <FormNumber control={control} name="terms.unitCost" label="Cost, net of tax" />
          <FormNumber control={control} name="terms.regularPrice" label="Regular price" />
          <FormNumber control={control} name="terms.taxRate" label="Tax" unit={0.01} suffix=" %" step={1} empty={0} />
        </div>
      )}
    </FormDialog>
  );
};

const describedOf = ({ code, name, gtin, brand, category, soldByWeight, replaces, replacesSizeRatio }: Product): Input => ({
  code, name, gtin, brand, category, soldByWeight, replaces, replacesSizeRatio,
});
