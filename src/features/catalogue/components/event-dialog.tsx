import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import { changedEventSchema, type CatalogueEvent } from "@shared/contract/catalogue-events";
import { changeEvent, enterEvent, removeEvent } from "../api/events";
import { useRefresh } from "../api/refresh";
import { FoldedHistory } from "./change-history";
import { FormDialog } from "./form-dialog";
import { FormDay, FormSelect, FormText } from "./form-fields";

type Input = z.input<typeof changedEventSchema>;
type Output = z.output<typeof changedEventSchema>;

const fields = ["code", "name", "firstDay", "lastDay", "region"];
const blank: Input = { code: "", name: "", firstDay: "", lastDay: "", region: null };

type EventDialogProps = {
  event: CatalogueEvent | null;
  /** What a new occurrence begins with: another of the same event. */
  like?: CatalogueEvent;
  codes: readonly string[];
  regions: readonly string[];
  isReadOnly: boolean;
  onClose: () => void;
};

/** Enters an occurrence of an event, or changes one. */
export const EventDialog = ({ event, like, codes, regions, isReadOnly, onClose }: EventDialogProps) => {
  const refresh = useRefresh();
  const form = useForm<Input, unknown, Output>({
    resolver: zodResolver(changedEventSchema), defaultValues: like ? { ...blank, code: like.code, name: like.name, region: like.region } : blank,
    values: event ?? undefined, resetOptions: { keepDirtyValues: true },
  });
  const { control } = form;
  return (
    <FormDialog
      title={event ? event.name : "Enter an event"} form={form} fields={fields} onClose={onClose} isReadOnly={isReadOnly} refresh={() => refresh("events")}
      save={async (values) => {
        await (event ? changeEvent(event, values) : enterEvent(values));
        return `${values.name} is saved.`;
      }}
      remove={event ? {
        sentence: "Its other occurrences stay.",
        act: async () => {
          await removeEvent(event);
          return `${event.name} is removed.`;
        },
      } : undefined}
      after={event && <FoldedHistory kind="event" code={event.code} />}
    >
      <div className="grid items-start gap-4 sm:grid-cols-2">
        <FormText control={control} name="code" label="Code" choices={codes} hint="The same each year, also where the days move." />
        <FormText control={control} name="name" label="Name" />
        <FormDay control={control} name="firstDay" label="First day" />
        <FormDay control={control} name="lastDay" label="Last day" />
        <FormSelect
          control={control} name="region" label="Held in"
          choices={[{ value: "", label: "The whole chain" }, ...regions.map((region) => ({ value: region, label: region }))]}
        />
      </div>
    </FormDialog>
  );
};
