import { Plus, X } from "lucide-react";
import type { Layout } from "@shared/contract/layouts";
import { Button } from "@/components/ui/button";
import { IconButton } from "@/components/ui/icon-button";
import { SelectField } from "@/components/ui/select-field";
import { TextField } from "@/components/ui/text-field";
import { useState } from "react";
import { columnLabel } from "../../view/column-labels";
import { fix, fixedColumns, openColumns } from "../../view/layout-mapping";

/** Columns of ours that the file does not have, with one value for every row: a file of a single week, or store. */
export const FixedValues = ({ layout, onChange }: { layout: Layout; onChange: (layout: Layout) => void }) => {
  const [chosen, setChosen] = useState("");
  const fixed = fixedColumns(layout);
  const open = openColumns(layout).map(({ column, isNeeded }) => ({
    value: column, label: `${columnLabel(column)}${isNeeded ? " (needed)" : ""}`,
  }));
  return (
    <div className="flex flex-col gap-3">
      <p className="text-sm text-muted">
        What the file leaves out because it is the same in every row, such as the week of a file of one week. Days are written
        2026-06-08, numbers with a point.
      </p>
      {fixed.map(({ column, value }) => (
        <div key={column} className="flex max-w-md items-end gap-2">
          <TextField
            label={`${columnLabel(column)} in every row`}
            fieldClassName="flex-1"
            value={value}
            maxLength={200}
            onChange={(event) => onChange(fix(layout, column, event.target.value))}
          />
          <IconButton label={`No fixed value for ${columnLabel(column)}`} onClick={() => onChange(fix(layout, column, null))}>
            <X />
          </IconButton>
        </div>
      ))}
      <div className="flex max-w-md items-end gap-2">
        <SelectField
          label="A column with one value for every row"
          fieldClassName="flex-1"
          choices={[{ value: "", label: "choose …" }, ...open]}
          value={chosen}
          onChange={setChosen}
        />
        <Button
          disabled={chosen === ""}
          onClick={() => {
            onChange(fix(layout, chosen, ""));
            setChosen("");
          }}
        >
          <Plus aria-hidden="true" /> Add
        </Button>
      </div>
    </div>
  );
};
