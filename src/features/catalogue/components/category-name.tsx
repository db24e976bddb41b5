import { zodResolver } from "@hookform/resolvers/zod";
import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import { useForm } from "react-hook-form";
import { z } from "zod";
import type { Category } from "@shared/contract/catalogue-products";
import { textSchema } from "@shared/contract/catalogue-values";
import { Button } from "@/components/ui/button";
import { usePermission } from "@/lib/session";
import { categoriesQuery, nameCategory } from "../api/categories";
import { useRefresh } from "../api/refresh";
import { FoldedHistory } from "./change-history";
import { FormDialog } from "./form-dialog";
import { FormText } from "./form-fields";

/** Gives a category, which files know by its code only, a better name. */
export const CategoryName = ({ code }: { code: string }) => {
  const mayWrite = usePermission("catalogue:write");
  const category = useQuery(categoriesQuery()).data?.find((each) => each.code === code);
  const [isOpen, setIsOpen] = useState(false);
  if (!mayWrite || !category) return null;
  return (
    <>
      <Button className="justify-self-start" onClick={() => setIsOpen(true)}>Name this category</Button>
      {isOpen && <CategoryDialog category={category} onClose={() => setIsOpen(false)} />}
    </>
  );
};

const schema = z.object({ name: textSchema(120) });
type Named = z.output<typeof schema>;

const CategoryDialog = ({ category, onClose }: { category: Category; onClose: () => void }) => {
  const refresh = useRefresh();
  const form = useForm<Named>({ resolver: zodResolver(schema), values: { name: category.name }, resetOptions: { keepDirtyValues: true } });
  return (
    <FormDialog
      title={`Category ${category.code}`} form={form} fields={["name"]} onClose={onClose} refresh={() => refresh("categories", "products")}
      save={async ({ name }) => {
        await nameCategory(category, name);
        return `${name} is saved.`;
      }}
      after={<FoldedHistory kind="category" code={category.code} />}
    >
      <FormText control={form.control} name="name" label="Name" hint="Files go on naming it by its code." />
    </FormDialog>
  );
};
