import { CircleAlert } from "lucide-react";
import { useState } from "react";
import type { LayoutPreview } from "@shared/contract/saved-layouts";
import type { Layout } from "@shared/contract/layouts";
import { Button } from "@/components/ui/button";
import { controlStyle } from "@/components/ui/control-style";
import { classNames } from "@/lib/class-names";
import { columnLabel } from "../../view/column-labels";
import { assign, openColumns, oursAt, surenessWord, warningPlace } from "../../view/layout-mapping";

type FileRowsProps = {
  layout: Layout;
  preview: LayoutPreview;
  /** Absent where it is only looked at. */
  onChange?: (layout: Layout) => void;
};

const fewRows = 5;

/** The file's first rows as they stand, and above each column what of ours it becomes. */
export const FileRows = ({ layout, preview, onChange }: FileRowsProps) => {
  const [isLong, setLong] = useState(false);
  const rows = isLong ? preview.rows : preview.rows.slice(0, fewRows);
  return (
    <div>
      <div role="region" aria-label="The file’s first rows as they stand" tabIndex={0} className="overflow-x-auto rounded-md border border-hairline">
        <table className="w-full border-separate border-spacing-0 text-sm">
          <caption className="sr-only">The file’s first rows as they stand, and what each column becomes</caption>
          <thead className="text-left align-top">
            <tr>
              <th scope="row" className="sticky left-0 z-10 border-r border-hairline bg-sheet px-3 pt-3 font-medium text-muted">becomes</th>
              {preview.fileColumns.map((column) => (
                <th key={column.position} scope="col" className="min-w-40 px-2 pt-2 font-normal">
                  <ColumnChoice layout={layout} column={column} onChange={onChange} />
                </th>
              ))}
            </tr>
            <tr>
              <th scope="row" className="sticky left-0 z-10 border-r border-b border-hairline bg-sheet px-3 py-1.5 font-medium text-muted">line</th>
              {preview.fileColumns.map(({ name, position }) => (
                <th
                  key={position}
                  scope="col"
                  className={classNames("border-b border-hairline px-3 py-1.5 font-semibold break-words", oursAt(layout, position) === null && "text-muted")}
                >
                  {name === "" ? `Column ${position + 1}` : name}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {rows.map(({ line, fields }) => (
              <tr key={line}>
                <td className="sticky left-0 border-r border-hairline bg-sheet px-3 py-1 text-muted">{line}</td>
                {preview.fileColumns.map(({ position }) => (
                  <td
                    key={position}
                    className={classNames("max-w-64 truncate px-3 py-1 whitespace-pre", oursAt(layout, position) === null && "text-muted")}
                    title={fields[position]}
                  >
                    {fields[position] ?? ""}
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {preview.rows.length > fewRows && (
        <Button tone="quiet" size="small" className="mt-2" onClick={() => setLong(!isLong)}>
          {isLong ? "Show fewer rows" : `Show ${preview.rows.length} rows`}
        </Button>
      )}
      <ColumnWarnings preview={preview} />
    </div>
  );
};

type ColumnChoiceProps = Omit<FileRowsProps, "preview"> & { column: LayoutPreview["fileColumns"][number] };

const ColumnChoice = ({ layout, column, onChange }: ColumnChoiceProps) => {
  const { name, position, proposed, why, confidence } = column;
  const ours = oursAt(layout, position);
  const open = openColumns(layout);
  const taken = Object.keys(layout.mapping).filter((one) => one !== ours);
  const fileName = name === "" ? `column ${position + 1}` : name;
  if (!onChange) return <p className={ours ? "font-medium text-accent" : "text-muted"}>{ours ? columnLabel(ours) : "not used"}</p>;
  return (
    <>
      <select
        aria-label={`What ${fileName} becomes`}
        value={ours ?? ""}
        onChange={(event) => onChange(assign(layout, position, event.target.value === "" ? null : event.target.value))}
        className={classNames(controlStyle, "px-2", ours ? "border-accent bg-accent-soft font-medium" : "text-muted")}
      >
        <option value="">not used</option>
        {ours && <option value={ours}>{columnLabel(ours)}</option>}
        <optgroup label="Still to be found">
          {open.map(({ column: one, isNeeded }) => (
            <option key={one} value={one}>
              {columnLabel(one)}
              {isNeeded ? " (needed)" : ""}
            </option>
          ))}
        </optgroup>
        <optgroup label="Taken from another column now">
          {taken.map((one) => (
            <option key={one} value={one}>
              {columnLabel(one)}
            </option>
          ))}
        </optgroup>
      </select>
      <p className="mt-1 mb-1 line-clamp-2 min-h-8 px-0.5 text-xs text-muted" title={why}>
        {ours !== null && ours === proposed && (
          <>
            <span className="font-medium text-ink">{surenessWord(confidence)}</span>: {why}
          </>
        )}
        {ours !== null && ours !== proposed && "as you say"}
        {ours === null && proposed === null && why}
      </p>
    </>
  );
};

/** What is to be said of single columns, and of the mapping as a whole. */
const ColumnWarnings = ({ preview }: { preview: LayoutPreview }) => {
  const own = preview.warnings.filter(({ code }) => warningPlace(code) === "columns" && code !== "column-not-found");
  if (own.length === 0) return null;
  return (
    <ul className="mt-3 flex flex-col gap-1.5">
      {own.map(({ code, message, position }) => (
        <li key={`${code} ${position ?? ""}`} className="flex items-start gap-2 text-sm text-caution">
          <CircleAlert className="mt-0.5 size-4 shrink-0" aria-hidden="true" />
          {message}
        </li>
      ))}
    </ul>
  );
};
