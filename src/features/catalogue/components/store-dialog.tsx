import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import type { Store } from "@shared/contract/catalogue";
import { newStoreSchema } from "@shared/contract/catalogue-stores";
import { useRefresh } from "../api/refresh";
import { changeStore, enterStore, removeStore } from "../api/store-changes";
import { FoldedHistory } from "./change-history";
import { FormDialog } from "./form-dialog";
import { FormDay, FormText } from "./form-fields";

type Input = z.input<typeof newStoreSchema>;
type Output = z.output<typeof newStoreSchema>;

const fields = ["code", "name", "region", "opened", "closed"];
const blank: Input = { code: "", name: "", region: "", opened: null, closed: null };

type StoreDialogProps = { store: Store | null; regions: readonly string[]; isReadOnly: boolean; onClose: () => void };

/** Enters a store, or changes one. */
export const StoreDialog = ({ store, regions, isReadOnly, onClose }: StoreDialogProps) => {
  const refresh = useRefresh();
  const { control, ...rest } = useForm<Input, unknown, Output>({
    resolver: zodResolver(newStoreSchema), defaultValues: blank, values: store ?? undefined, resetOptions: { keepDirtyValues: true },
  });
  const save = async ({ code, ...described }: Output) => {
    await (store ? changeStore(store, described) : enterStore({ code, ...described }));
    return `${described.name} is saved.`;
  };
  return (
    <FormDialog
      title={store ? `${store.name} (${store.code})` : "Enter a store"}
      form={{ control, ...rest }} fields={fields} save={save} refresh={() => refresh("stores")} onClose={onClose} isReadOnly={isReadOnly}
      remove={store ? {
        sentence: "Only a store that nothing refers to can be removed.",
        act: async () => {
          await removeStore(store);
          return `${store.name} is removed.`;
        },
      } : undefined}
      after={store && <FoldedHistory kind="store" code={store.code} />}
    >
      {!store && <FormText control={control} name="code" label="Code" hint="As files name it; it cannot be changed later." />}
      <FormText control={control} name="name" label="Name" />
      <FormText control={control} name="region" label="Region" choices={regions} hint="Stores of a region share events and temperatures." />
      <div className="grid gap-4 sm:grid-cols-2">
        <FormDay control={control} name="opened" label="First day of trade" />
        <FormDay control={control} name="closed" label="Last day of trade" hint="Closes the store; its sales stay." />
      </div>
    </FormDialog>
  );
};
