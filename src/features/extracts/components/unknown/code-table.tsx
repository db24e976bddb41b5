import { useId } from "react";
import { controlStyle } from "@/components/ui/control-style";
import { TextField } from "@/components/ui/text-field";
import { useChainFormat } from "@/lib/format/chain-format";
import { chooseAll, chosenCodes, entryOf, fillDetail, writeEntry } from "../../view/codes-to-enter";
import type { Entries, UnknownCode } from "../../view/codes-to-enter";

type CodeTableProps = {
  /** "Stores", "Products" */
  title: string;
  /** What stands beside the name: "Region", "Category". */
  detail: string;
  /** Known values of it, offered while typing. */
  known: readonly string[];
  codes: readonly UnknownCode[];
  total: number;
  entries: Entries;
  onChange: (entries: Entries) => void;
  /** Empty fields of chosen codes are marked. */
  showsLacks: boolean;
};

/** Codes that the catalogue lacks, each with the fields it needs to be entered. */
export const CodeTable = (props: CodeTableProps) => {
  const { title, detail, known, codes, total, entries, onChange, showsLacks } = props;
  const listId = useId();
  const format = useChainFormat();
  const chosen = chosenCodes(codes, entries);
  const isAll = chosen.length === codes.length;
  return (
    <fieldset className="min-w-0">
      <legend className="mb-2 text-base font-semibold">
        {title} <span className="font-normal text-muted">{format.number(total)}</span>
      </legend>
      {total > codes.length && (
        <p className="mb-2 text-sm text-muted">
          The {format.number(codes.length)} with the most rows stand here. For so many, a {title.toLowerCase()} file is less work.
        </p>
      )}
      <datalist id={listId}>
        {known.map((value) => (
          <option key={value} value={value} />
        ))}
      </datalist>
      <div className="max-h-96 overflow-auto rounded-md border border-hairline" role="region" aria-label={`${title} that are not known`} tabIndex={0}>
        <table className="w-full border-separate border-spacing-0">
          <thead className="sticky top-0 z-10 bg-sheet text-left text-sm text-muted">
            <tr>
              <th scope="col" className="w-10 border-b border-hairline py-2 pl-3">
                <input
                  type="checkbox"
                  aria-label={`Choose all ${title.toLowerCase()}`}
                  className="mt-1 size-4 accent-accent"
                  checked={isAll}
                  onChange={() => onChange(chooseAll(codes, entries, !isAll))}
                />
              </th>
              <th scope="col" className="border-b border-hairline px-3 font-medium">Code</th>
              <th scope="col" className="border-b border-hairline px-3 text-right font-medium max-sm:hidden">Rows</th>
              <th scope="col" className="border-b border-hairline px-3 font-medium max-md:hidden">Weeks</th>
              <th scope="col" className="border-b border-hairline px-3 font-medium">Name</th>
              <th scope="col" className="border-b border-hairline px-3 font-medium">{detail}</th>
            </tr>
          </thead>
          <tbody>
            {codes.map(({ code, rows, firstWeek, lastWeek }) => {
              const entry = entryOf(entries, code);
              const isWanting = showsLacks && entry.isChosen;
              const write = (part: { name?: string; detail?: string; isChosen?: boolean }) => onChange(writeEntry(entries, code, part));
              return (
                <tr key={code}>
                  <td className="py-1.5 pl-3">
                    <input
                      type="checkbox"
                      aria-label={`Enter ${code}`}
                      className="mt-1 size-4 accent-accent"
                      checked={entry.isChosen}
                      onChange={(event) => write({ isChosen: event.target.checked })}
                    />
                  </td>
                  <td className="px-3">
                    <code className="text-sm">{code}</code>
                  </td>
                  <td className="px-3 text-right max-sm:hidden">{format.number(rows)}</td>
                  <td className="px-3 text-sm whitespace-nowrap text-muted max-md:hidden">
                    {firstWeek && lastWeek ? format.weekSpan(firstWeek, lastWeek) : "–"}
                  </td>
                  <td className="px-2 py-1.5">
                    <input
                      aria-label={`Name of ${code}`}
                      aria-invalid={(isWanting && entry.name.trim() === "") || undefined}
                      className={controlStyle}
                      maxLength={120}
                      value={entry.name}
                      onChange={(event) => write({ name: event.target.value })}
                    />
                  </td>
                  <td className="py-1.5 pr-3 pl-1">
                    <input
                      aria-label={`${detail} of ${code}`}
                      aria-invalid={(isWanting && entry.detail.trim() === "") || undefined}
                      className={controlStyle}
                      maxLength={64}
                      list={listId}
                      value={entry.detail}
                      onChange={(event) => write({ detail: event.target.value })}
                    />
                  </td>
                </tr>
              );
            })}
          </tbody>
        </table>
      </div>
      {chosen.length > 1 && (
        <TextField
          label={`${detail} for all ${chosen.length} that are chosen`}
          fieldClassName="mt-3 max-w-xs"
          list={listId}
          onChange={(event) => onChange(fillDetail(codes, entries, event.target.value))}
        />
      )}
    </fieldset>
  );
};
